import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { groupRepeats, type RepeatRun } from '@shared/analysis/groupRepeats';
import type { Analysis, BudgetLine, Flag } from '@shared/schemas/analysis';
import { stringRig } from '../../factories/rawRuns';

const result = (value: number, u: number) => ({ value, u, dof: null, coverage_factor: 2, expanded_u: 2 * u });
const share = (term: BudgetLine['term'], u: number): BudgetLine => ({ term, type: 'B', u, dof: null });
const open = (code: Flag['code']): Flag => ({ code, mark: null, seen: {}, choices: [], answered: false });

let runs = 0;
/** A run of 1 m with T0 in s, an own uncertainty of 10 ms and a shared one of 3 ms. */
function run(
  period_s: number,
  parts: Partial<RepeatRun> & { flags?: Analysis['flags']; own_s?: number } = {},
): RepeatRun {
  const { flags = [], own_s = 0.01, ...rest } = parts;
  return {
    id: `run ${(runs += 1)}`,
    place: 'bench 1',
    rig: stringRig(),
    isSetAside: false,
    analysis: {
      small_period_s: result(period_s, own_s),
      budget: [share('timing', own_s), share('amplitude', 0.003)],
      flags,
    },
    ...rest,
  };
}

describe('repeats', () => {
  // Mean 2.01; s/√5 = 0.00707107 by hand, with 0.003 shared: u = 0.00768115.
  const five = [2.0, 2.02, 2.01, 1.99, 2.03].map((period) => run(period));

  test('of one set-up make one mean, stated as the class does', () => {
    const { groups } = groupRepeats(five, 'gum');
    expect(groups).toHaveLength(1);
    expect(groups[0]).toMatchObject({ runs: five.map(({ id }) => id) });
    expect(groups[0]!.mean!.value).toBeCloseTo(2.01, 12);
    expect(groups[0]!.mean!.u).toBeCloseTo(0.00768115, 8);
    expect(groupRepeats(five, 'half_range').groups[0]!.mean!.expanded_u).toBeCloseTo(0.02, 12);
  });

  test('are compared by what each brings of its own: χ² of the five is 10 in four degrees of freedom', () => {
    // Deviations −1, 1, 0, −2, 2 times the own 10 ms: 1 + 1 + 0 + 4 + 4.
    const { agreement } = groupRepeats(five, 'gum').groups[0]!;
    expect(agreement!.chiSquare).toBeCloseTo(10, 9);
    expect(agreement!.birgeRatio).toBeCloseTo(Math.sqrt(10 / 4), 9);
    // Critical value of χ² at 5 % in 4 degrees of freedom: 9.488 (any table).
    expect(agreement!.isConsistent).toBe(false);
    expect(
      groupRepeats(
        [2.0, 2.01, 2.005].map((period) => run(period)),
        'gum',
      ).groups[0]!.agreement!.isConsistent,
    ).toBe(true);
  });

  test('of another length, label or bench are other repeats', () => {
    const others = [
      run(2),
      run(2, { rig: stringRig({ length_readings: [{ to: 'centre', um: 900_000 }] }) }),
      run(2, { rig: stringRig({ label: 'brass bob' }) }),
      run(2, { place: 'bench 2' }),
      run(2),
    ];
    expect(groupRepeats(others, 'gum').groups.map((group) => group.runs.length)).toEqual([2, 1, 1, 1]);
  });

  test('a single run has no mean and nothing to agree with', () => {
    expect(groupRepeats([run(2)], 'gum').groups[0]).toMatchObject({ mean: undefined, agreement: undefined });
  });

  test('leave out, by name, what is set aside, in doubt, of no rig or without T0', () => {
    const aside = run(3, { isSetAside: true });
    const doubt = run(1, { flags: [open('half_swings')] });
    const rigless = run(2, { rig: null });
    const uncorrected = run(2);
    uncorrected.analysis = { ...uncorrected.analysis, small_period_s: null };
    const { groups, leftOut } = groupRepeats([aside, doubt, rigless, uncorrected, run(2), run(2.01)], 'gum');
    expect(groups.map((group) => group.mean!.value)).toEqual([expect.closeTo(2.005, 12)]);
    expect(leftOut).toEqual({
      set_aside: [aside.id],
      count_open: [doubt.id],
      no_rig: [rigless.id],
      no_small_period: [uncorrected.id],
    });
  });

  test('count with an open flag that is not about the count, and with an answered one that is', () => {
    const late = run(2, { flags: [open('late_first_mark')] });
    const answered = run(2, { flags: [{ ...open('missed'), answered: true }] });
    expect(groupRepeats([late, answered], 'gum').groups[0]!.runs).toHaveLength(2);
  });

  test('without an uncertainty of their own are not compared', () => {
    expect(groupRepeats([run(2, { own_s: 0 }), run(2.1, { own_s: 0 })], 'gum').groups[0]!.agreement).toBeUndefined();
  });

  test('every run is in one group or left out once, in any order', () => {
    const some = fc.array(
      fc.record({
        period: fc.double({ min: 0.5, max: 4, noNaN: true }),
        isSetAside: fc.boolean(),
        hasRig: fc.boolean(),
        place: fc.constantFrom('a', 'b'),
      }),
    );
    fc.assert(
      fc.property(some, (drawn) => {
        const all = drawn.map(({ period, isSetAside, hasRig, place }) =>
          run(period, { isSetAside, place, rig: hasRig ? stringRig() : null }),
        );
        const told = (summary: ReturnType<typeof groupRepeats>) => [
          ...summary.groups.flatMap((group) => group.runs),
          ...Object.values(summary.leftOut).flat(),
        ];
        expect(told(groupRepeats(all, 'gum')).sort()).toEqual(all.map(({ id }) => id).sort());
        const means = (summary: ReturnType<typeof groupRepeats>) =>
          summary.groups.map((group) => group.mean?.value.toFixed(9)).sort();
        expect(means(groupRepeats([...all].reverse(), 'gum'))).toEqual(means(groupRepeats(all, 'gum')));
      }),
    );
  });
});
