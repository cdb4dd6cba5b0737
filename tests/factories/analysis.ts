import type { Analysis } from '@shared/schemas/analysis';

/**
 * An analysis of marks once a swing of 2 s, each off the even line by so many ms; null leaves the mark out.
 * For what screens make of an analysis; what an analysis makes of a run is tested with real ones.
 */
export function analysisOf(off_ms: (number | null)[], parts: Partial<Analysis> = {}): Analysis {
  const marks = off_ms.map((off, mark) => ({
    mark,
    swing: off === null ? null : mark,
    time_s: 2 * mark + (off ?? 0) / 1000,
    lap_s: mark === 0 || off === null ? null : 2,
    residual_s: off === null ? null : off / 1000,
  }));
  return {
    run_id: '018f0000-0000-7000-8000-000000000001',
    input_digest: '0'.repeat(64),
    method: 'line-1',
    swings: off_ms.length - 1,
    marks_used: off_ms.filter((off) => off !== null).length,
    period_s: { value: 2, u: 0.002, dof: 19, coverage_factor: 2.09, expanded_u: 0.0042 },
    small_period_s: null,
    amplitude: null,
    jitter_s: 0.04,
    lag1: 0.1,
    motion: null,
    length_m: null,
    g_m_s2: null,
    corrections: [],
    budget: [],
    g_budget: [],
    flags: [],
    marks,
    missing: ['amplitude', 'length'],
    ...parts,
  };
}
