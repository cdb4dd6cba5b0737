import type { Sequelize } from 'sequelize';
import { defineActivityEntry } from './ActivityEntry';
import { defineCurrentAnalysis } from './CurrentAnalysis';
import { defineEdit } from './Edit';
import { defineFeedRow } from './FeedRow';
import { defineRun } from './Run';
import { defineSchoolClass } from './SchoolClass';
import { defineSignIn } from './SignIn';
import { defineStaffAccount } from './StaffAccount';
import { defineStaffToken } from './StaffToken';
import { defineStoredAnalysis } from './StoredAnalysis';
import { defineStudent } from './Student';

/** Models of one open database: bound to it alone, so that two servers can live in one process. */
export const defineModels = (sequelize: Sequelize) => ({
  ActivityEntry: defineActivityEntry(sequelize),
  CurrentAnalysis: defineCurrentAnalysis(sequelize),
  Edit: defineEdit(sequelize),
  FeedRow: defineFeedRow(sequelize),
  Run: defineRun(sequelize),
  SchoolClass: defineSchoolClass(sequelize),
  SignIn: defineSignIn(sequelize),
  StaffAccount: defineStaffAccount(sequelize),
  StaffToken: defineStaffToken(sequelize),
  StoredAnalysis: defineStoredAnalysis(sequelize),
  Student: defineStudent(sequelize),
});
export type Models = ReturnType<typeof defineModels>;
