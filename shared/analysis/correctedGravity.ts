import { gravityFrom } from '../physics/gravity';
import { reducedLength } from '../physics/reducedLength';
import { rigCorrections, type CorrectionGroup } from '../physics/rigCorrections';
import type { BudgetLine, CorrectionLine } from '../schemas/analysis';
import type { Rig } from '../schemas/rig';
import type { Estimate } from './method';

/** A share as small as this is what is left of quantities that cancel. */
const ROUNDING = 1e-9;

/**
 * g = 4π²L/T0² with L the rig's reduced length, corrected for the small effects the rig says enough about.
 * Every share of T0 counts 2g/T0, a length g/L; what the corrections are themselves unsure of has lines of its own.
 *
 * @param smallPeriod  T0, s
 * @param rig          as entered
 * @returns            undefined when the rig does not say enough for a reduced length
 */
export function correctedGravity(
  smallPeriod: Estimate,
  rig: Rig,
): (Estimate & { corrections: CorrectionLine[] }) | undefined {
  const length = reducedLength(rig);
  const found = length && smallPeriod.value > 0 ? rigCorrections(rig, smallPeriod.value) : undefined;
  if (!length || !found) return undefined;
  const value = gravityFrom(smallPeriod.value, length.value) * found.factor;
  const perSecond = (2 * value) / smallPeriod.value;
  const line = (term: BudgetLine['term'], u: number): BudgetLine => ({ term, type: 'B', u, dof: null });
  const ofLength = (part: 'length' | 'mass' | 'hub') => line(part, (length.by[part] * value) / length.value);
  const groups = Object.entries(found.u) as [CorrectionGroup, number][];
  const others = [ofLength('mass'), ofLength('hub'), ...groups.map(([term, relative]) => line(term, relative * value))];
  return {
    value,
    shares: [
      ...smallPeriod.shares.map((share) => ({ ...share, u: share.u * perSecond })),
      ofLength('length'),
      ...others.filter(({ u }) => u > ROUNDING * value),
    ],
    corrections: found.effects.map(({ term, period }) => ({
      term,
      period_rel: period,
      // Without the term, g is lower by the factor (1 + x)².
      g_m_s2: value * (1 - 1 / (1 + period) ** 2),
    })),
  };
}
