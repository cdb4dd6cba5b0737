import { forAllSchedules } from './sim/forAllSchedules';

forAllSchedules(0);
