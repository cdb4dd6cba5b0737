import 'fake-indexeddb/auto';
import { expect, it } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import { EditChange, FLAG_CODES, type FlagCode } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import { gated, keyed, metreRig, tapped, tappedWithDouble, tenDegrees } from '../../factories/captures';
import { mountApp } from '../support/mountApp';
import { plugIn } from '../support/network';
import { rawRun } from '../support/samples';
import { editFor } from '@/components/run/flagChoices';
import FlagCard from '@/components/run/FlagCard.vue';

plugIn(() => Promise.reject(new TypeError('no network')));

const { mark_us } = tapped();
/** A run in which the check finds each flag. */
const PLANTED: Record<FlagCode, Partial<RawRun>> = {
  double: { capture: tappedWithDouble() },
  missed: { capture: tapped({ mark_us: mark_us.filter((_, i) => i !== 10) }) },
  half_swings: { capture: tapped({ mark_us: mark_us.map((us) => Math.round(us / 2)) }), rig: metreRig },
  count_from_one: { capture: keyed({ total_us: 38_150_000 }), rig: metreRig, amplitudes: tenDegrees },
  late_first_mark: { capture: tapped({ mark_us: mark_us.map((us, i) => (i === 0 ? 0 : us - 300_000)) }) },
  outlier: { capture: tapped({ mark_us: mark_us.map((us, i) => (i === 9 ? us + 350_000 : us)) }) },
  clock_gap: {
    capture: tapped({ events: [{ kind: 'clock_gap', at_us: 9_000_000, after_mark: 4, wall_minus_mono_ms: 2500 }] }),
  },
  cut_short: { capture: tapped({ ended: 'cut_short' }) },
  chatter: { capture: brokenBlock() },
  pause: { capture: tapped({ mark_us: mark_us.map((us, i) => (i < 9 ? us : us + 800_000)) }) },
  off_centre: {
    capture: tapped({ swings_per_mark: 0.5, mark_us: mark_us.map((us, i) => us / 2 + (i % 2) * 120_000) }),
  },
  drift: { capture: drifting(), amplitudes: tenDegrees },
  round_numbers: { capture: keyed({ total_us: 40_000_000 }) },
  implausible: { rig: metreRig, capture: keyed({ total_us: 60_000_000 }), amplitudes: tenDegrees },
};

/** A gate run whose sixth block is broken in two for a tenth of a millisecond. */
function brokenBlock(): RawRun['capture'] {
  const whole = gated();
  const [on, off] = whole.block_us[5]!;
  const middle = Math.round((on + off) / 2);
  const block_us = whole.block_us.toSpliced(5, 1, [on, middle - 50], [middle + 50, off]);
  return { ...whole, block_us };
}

/** A gate run in which T grows by a hundredth. */
function drifting(): RawRun['capture'] {
  const even = gated();
  const later = (us: number) => Math.round(us + (0.005 * us * us) / even.block_us.at(-1)![1]);
  return { ...even, block_us: even.block_us.map(([on, off]) => [later(on), later(off)]) };
}

function found(code: FlagCode) {
  const content = rawRun(PLANTED[code]);
  const analysis = analyseRun({ run: { digest: digestOf(canonicalText(content)), content }, edits: [] });
  return { analysis, flag: analysis.flags.find((flag) => flag.code === code)! };
}

it.each(FLAG_CODES)('%s is told in a sentence with its numbers filled in, and every choice has words', (code) => {
  const { analysis, flag } = found(code);
  const { wrapper } = mountApp(FlagCard, { flag, marks: analysis.marks, mayEdit: true });
  const text = wrapper.text();
  expect(text).not.toMatch(/[{}]|undefined|NaN|run\.flag|\d\.\d{4}/);
  expect(text).toMatch(/[A-Z].+\d.+\./);
  for (const button of wrapper.findAll('button')) expect(button.text()).toMatch(/^[A-Z]/);
  wrapper.unmount();
});

it.each(FLAG_CODES)('each choice offered for %s makes an edit the server takes', (code) => {
  const { flag } = found(code);
  expect(flag.choices.length).toBeGreaterThan(0);
  for (const choice of flag.choices) {
    expect(EditChange.safeParse(editFor(flag, choice, 19)).error).toBeUndefined();
  }
});

it('a first mark that was planted 300 ms late is told in milliseconds', () => {
  const { analysis, flag } = found('late_first_mark');
  const { wrapper } = mountApp(FlagCard, { flag, marks: analysis.marks, mayEdit: true });
  // 300 ms and what the hand's own scatter of 30 ms leaves open.
  expect(Number(/came (\d+) ms late/.exec(wrapper.text())![1])).toBeGreaterThan(250);
  expect(Number(/came (\d+) ms late/.exec(wrapper.text())![1])).toBeLessThan(350);
  wrapper.unmount();
});

it('the expected period is never told, only how the count stands to it', () => {
  const { analysis, flag } = found('half_swings');
  const { wrapper } = mountApp(FlagCard, { flag, marks: analysis.marks, mayEdit: true });
  expect(wrapper.text()).not.toContain(flag.seen.expected_s!.toFixed(1));
  wrapper.unmount();
});

it('whoever may not edit sees the flag and no choices', () => {
  const { analysis, flag } = found('double');
  const { wrapper } = mountApp(FlagCard, { flag, marks: analysis.marks, mayEdit: false });
  expect(wrapper.text()).toContain('Double tap');
  expect(wrapper.findAll('button')).toEqual([]);
  wrapper.unmount();
});

it.each([
  ['one', 'the “one” said at the first pass taken off already'],
  ['zero', 'with “zero” said at the first pass'],
  ['not_sure', 'Was “one” said at the first pass?'],
] as const)('a count that does not fit does not ask again what was answered with %s', (saidFirst, words) => {
  const { analysis, flag } = found('count_from_one');
  const { wrapper } = mountApp(FlagCard, { flag, marks: analysis.marks, mayEdit: true, saidFirst });
  expect(wrapper.text()).toContain(words);
  if (saidFirst !== 'not_sure') expect(wrapper.text()).not.toContain('Was “one”');
  wrapper.unmount();
});
