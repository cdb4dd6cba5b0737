import { gravityFrom } from '../physics/gravity';
import { expectedPeriod, reducedLength } from '../physics/reducedLength';
import { hypot } from '../statistics/hypot';
import { degrees } from '../units/angle';
import type { Finding, Known } from './checkMarks';
import type { RunView } from './runView';

/** s. A thread of 1 cm swings in this; no hand can follow less. */
const SHORTEST_PERIOD = 0.2;
/** g from T0 and length is out of the world when it is off by so large a share … */
const LEAST_SHARE = 0.1;
/** … and by so many standard uncertainties. */
const FAR = 6;
/** Amplitudes grow when one is larger than an earlier one by so many standard uncertainties, and … */
const FAR_GROWN = 4.5;
/** … by so many rad, for an eye that trusts itself too much. */
const LEAST_GROWN = (1 / 180) * Math.PI;

/**
 * Results no pendulum can have: far too short a period, a length with which g comes out as nowhere on earth, an
 * amplitude that grows. Something that was typed in is of another run, or in another unit.
 */
export function checkPlausible(view: RunView, known: Known): Finding[] {
  const seen = tooShort(known) ?? outOfTheWorld(view, known) ?? growing(known);
  return seen ? [{ code: 'implausible', mark: null, seen, choices: ['keep_flagged'] }] : [];
}

function tooShort({ period }: Known): Finding['seen'] | undefined {
  return period && period.value < SHORTEST_PERIOD ? { period_ms: 1000 * period.value } : undefined;
}

function outOfTheWorld({ rig }: RunView, { smallPeriod }: Known): Finding['seen'] | undefined {
  const expected = rig ? expectedPeriod(rig) : undefined;
  const length = rig ? reducedLength(rig) : undefined;
  if (!smallPeriod || !expected || !length) return undefined;
  const off = Math.abs(smallPeriod.value - expected.value);
  // g goes with the square of the period.
  if (off <= (LEAST_SHARE / 2) * expected.value || off <= FAR * hypot(smallPeriod.u, expected.u)) return undefined;
  return { length_m: length.value, g_m_s2: gravityFrom(smallPeriod.value, length.value) };
}

function growing({ readings }: Known): Finding['seen'] | undefined {
  const inOrder = [...readings].sort((a, b) => a.swing - b.swing);
  let least = inOrder[0];
  for (const reading of inOrder) {
    const grown = reading.amplitude - least!.amplitude;
    if (grown > Math.max(FAR_GROWN * hypot(reading.u, least!.u), LEAST_GROWN)) {
      return { earlier_deg: degrees(least!.amplitude), later_deg: degrees(reading.amplitude), swing: reading.swing };
    }
    if (reading.amplitude + reading.u < least!.amplitude + least!.u) least = reading;
  }
  return undefined;
}
