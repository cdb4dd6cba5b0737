import { exp } from '../physics/elementary';
import { chiSquareTail } from '../statistics/chiSquare';
import { dot, orthonormal, without } from '../statistics/orthonormal';
import { polynomials } from '../statistics/polynomials';
import type { Finding } from './checkMarks';
import type { RunView } from './runView';
import { waysOf } from './waysOf';

/** Steps of the last digit that readings may be rounder by, coarsest first. */
const ROUNDER = [1000, 500, 100, 50, 20, 10, 5, 2];
/** A good run's readings are all that round by chance once in five hundred. */
const CHANCE = 0.002;
/**
 * s. Practised tappers scatter by 20 to 50 ms; nobody is known to keep below this. Common practice, no source.
 * @see Repp, Psychon. Bull. Rev. 12, 969 (2005) for what is usual (figures from memory)
 */
const STEADIEST_HAND = 0.01;
const FEWEST_LEFT_OVER = 6;
/** With fewer readings than this a straight line has to do for the curve they keep to. */
const FEWEST_FOR_CURVE = 10;
/** s. A coarser stopwatch does not show how even a hand is. */
const COARSEST = 0.01;

/**
 * A notice about readings typed in: all of them end on rounder numbers than the stopwatch shows, or they lie
 * evener than hands are. Either may have a good reason, which only the people who were there know.
 */
export function checkRoundNumbers(view: RunView): Finding[] {
  const { capture } = view;
  if (capture.kind !== 'keyed_total' && capture.kind !== 'keyed_splits') return [];
  const readings = capture.kind === 'keyed_total' ? [capture.total_us] : capture.mark_us.slice(1);
  const step = capture.reading_step_us;
  const rounder = ROUNDER.find((by) => readings.every((us) => us % (by * step) === 0));
  const curve = capture.kind === 'keyed_total' ? LONE : offCurve(view);
  const chance = rounder ? chanceOf(rounder, step / 1e6, curve) : 1;
  if (rounder && chance <= CHANCE) {
    return notice({ readings: readings.length, round_s: (rounder * step) / 1e6, step_s: step / 1e6 });
  }
  if (curve.free < FEWEST_LEFT_OVER || step / 1e6 > COARSEST) return [];
  const squares = dot(curve.left, curve.left);
  if (1 - chiSquareTail(squares / STEADIEST_HAND ** 2, curve.free) > CHANCE) return [];
  return notice({ readings: readings.length, scatter_ms: 1000 * Math.sqrt(squares / curve.free) });
}

function notice(seen: Finding['seen']): Finding[] {
  return [{ code: 'round_numbers', mark: null, seen, choices: ['keep_flagged'] }];
}

interface Curve {
  /** s, observed minus a smooth curve: splits that were worked out keep to no pendulum's motion. */
  left: number[];
  free: number;
}

/** One reading alone, of which no curve says where it should be. */
const LONE: Curve = { left: [0, Infinity], free: 0 };
/** Too few for a curve of their own. */
const TOO_FEW: Curve = { left: [], free: 0 };

function offCurve(view: RunView): Curve {
  const used = view.marks.filter((mark) => mark.swing !== null);
  const degree = used.length < FEWEST_FOR_CURVE ? 1 : 3;
  const swings = used.map(({ swing }) => swing!);
  const basis = orthonormal([...polynomials(swings, degree), ...waysOf(view)]);
  if (!basis || used.length <= basis.length) return TOO_FEW;
  const times = used.map(({ time }) => time);
  return { left: without(times, basis), free: used.length - basis.length };
}

/**
 * The chance that all readings come out as round as they do: that of each to hit the round number it is at,
 * which is high where the swing itself keeps to round numbers and jitter is small.
 */
function chanceOf(rounder: number, step: number, { left, free }: Curve): number {
  const jitter = free > 0 ? Math.max(Math.sqrt(dot(left, left) / free), step / 4) : step;
  return left.slice(1).reduce((chance, off) => {
    const hit = (step * exp(-((off / jitter) ** 2) / 2)) / (jitter * Math.sqrt(2 * Math.PI));
    return chance * Math.min(Math.max(hit, 1 / rounder), 1);
  }, 1);
}
