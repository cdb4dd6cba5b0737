import 'fake-indexeddb/auto';
import { flushPromises, type VueWrapper } from '@vue/test-utils';
import { afterEach, expect, it, vi } from 'vitest';
import { computed, defineComponent, h } from 'vue';
import { analyseRun } from '@shared/analysis/analyseRun';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import { RawRun } from '@shared/schemas/run';
import { readRunFile } from '@shared/schemas/runFile';
import { gated, keyed, metreRig, tapped, tappedWithDouble, tenDegrees } from '../../factories/captures';
import { mountApp } from '../support/mountApp';
import { plugIn } from '../support/network';
import { rawRun } from '../support/samples';
import RunSheet from '@/components/run/RunSheet.vue';
import { useRuns } from '@/stores/useRuns';
import { useSession } from '@/stores/useSession';
import { eventually } from '../../support/eventually';

/** The sheet over the real store of this device, as the page shows it. */
async function openSheet(parts: Partial<RawRun>) {
  const raw = RawRun.parse(rawRun(parts));
  const Page = defineComponent({
    setup() {
      const entry = computed(() => useRuns().entry(raw.id));
      return () => (entry.value ? h(RunSheet, { entry: entry.value, mayEdit: true }) : null);
    },
  });
  const { wrapper } = mountApp(Page);
  await useSession().ready;
  await useRuns().addRun(raw);
  await flushPromises();
  opened.push(wrapper);
  const press = async (name: string) => {
    await wrapper
      .findAll('button')
      .find((button) => button.text() === name || button.attributes('aria-label') === name)!
      .trigger('click');
    await eventually(() => expect(useRuns().entry(raw.id)!.edits.length).toBeGreaterThan(0));
    await flushPromises();
  };
  return { wrapper, press, entry: () => useRuns().entry(raw.id)! };
}
const foldOf = (wrapper: VueWrapper, title: string) =>
  wrapper.findAll('.fold-block').find((fold) => fold.find('summary').text() === title)!;
async function openFold(wrapper: VueWrapper, title: string) {
  await foldOf(wrapper, title).trigger('toggle');
  await eventually(() => expect(foldOf(wrapper, title).find('.fold-block__in > *').text()).not.toContain('Fetching'));
  await flushPromises();
  return foldOf(wrapper, title);
}
plugIn(() => Promise.reject(new TypeError('no network')));
const opened: { unmount(): void }[] = [];
afterEach(() => opened.splice(0).forEach((wrapper) => wrapper.unmount()));

it('a clean tap run shows T0 and g with their uncertainty and no accepted value', async () => {
  const { wrapper, entry } = await openSheet({ capture: tapped(), rig: metreRig, amplitudes: tenDegrees });
  const text = wrapper.text();
  const { small_period_s, g_m_s2 } = entry().analysis;
  expect(small_period_s!.value).toBeGreaterThan(1.9);
  expect(g_m_s2).not.toBeNull();
  expect(text).toContain('Small-amplitude period T₀');
  expect(text).toMatch(/\d\.\d+ plus or minus 0\.\d+ s/);
  expect(text).toMatch(/\d\.\d+ plus or minus \d?\.?\d+ m\/s²/);
  expect(text).toContain('Nothing stands out.');
  expect(text).not.toMatch(/Normal gravity here|accepted|9\.80/i);
});

it('without an amplitude T is shown, and what T0 needs', async () => {
  const { wrapper } = await openSheet({ capture: tapped() });
  expect(wrapper.text()).toContain('Period T');
  expect(wrapper.text()).toContain('T₀ needs the amplitude at the start');
});

it('leaving out a double tap answers its flag, and undoing brings it back', async () => {
  const { wrapper, press, entry } = await openSheet({ capture: tappedWithDouble(), amplitudes: tenDegrees });
  expect(wrapper.text()).toContain('One flag is open.');
  const before = entry().analysis.small_period_s!.value;

  await press('Leave out mark 9');
  expect(wrapper.text()).toContain('Nothing stands out.');
  expect(entry().analysis.small_period_s!.value).toBeGreaterThan(before);
  expect(wrapper.find('.pass-table__out').text()).toContain('left out');

  await press('Undo: Mark 9 left out');
  await eventually(() => expect(wrapper.text()).toContain('One flag is open.'));
  expect(entry().analysis.small_period_s!.value).toBe(before);
});

it('keeping a flag asks for a reason before it is kept', async () => {
  const { wrapper, entry } = await openSheet({ capture: tappedWithDouble() });
  const button = (name: string) => wrapper.findAll('button').find((one) => one.text() === name)!;
  await button('Keep it as it is').trigger('click');
  await wrapper.find('.flag-card form').trigger('submit');
  expect(wrapper.text()).toContain('A few words are needed');
  expect(entry().edits).toEqual([]);

  await wrapper.find('.flag-card form input').setValue('the bob was caught there');
  await wrapper.find('.flag-card form').trigger('submit');
  await eventually(() => expect(entry().edits[0]?.raw.reason).toBe('the bob was caught there'));
  expect(entry().edits[0]!.raw.change).toEqual({ kind: 'keep_flagged', flag: 'double', mark: 9 });
});

it('a count that fits another number of swings is set by what the person types', async () => {
  // 19 swings of 2.006 s, counted "one" at the first pass and called 20.
  const capture = keyed({ total_us: 38_150_000 });
  const { wrapper, entry } = await openSheet({ capture, rig: metreRig, amplitudes: tenDegrees });
  expect(wrapper.text()).toContain('the time fits 19 swings; 20 were counted');
  expect(wrapper.text()).toContain('Not settled');
  await wrapper
    .findAll('button')
    .find((one) => one.text() === 'Set the number of swings')!
    .trigger('click');
  await wrapper.find('.flag-card form').trigger('submit');
  await eventually(() => expect(entry().edits[0]?.raw.change).toEqual({ kind: 'set_swings', swings: 19 }));
  expect(entry().analysis.swings).toBe(19);
  await eventually(() => expect(wrapper.text()).not.toContain('Not settled'));
});

it('a gate run shows its marks and its budget', async () => {
  const { wrapper } = await openSheet({ capture: gated(), rig: metreRig });
  expect(wrapper.findAll('.pass-table tbody tr')).toHaveLength(21);
  expect(foldOf(wrapper, 'How was this got?').text()).toContain('Share');
});

it('the table and the strip tell the same numbers', async () => {
  const { wrapper, entry } = await openSheet({ capture: tapped() });
  const third = entry().analysis.marks[3]!;
  const shown = wrapper.findAll('.pass-table tbody tr')[3]!.text();
  expect(shown).toContain(third.time_s.toFixed(3));
  expect(shown).toContain(String(Math.round(Math.abs(third.residual_s! * 1000))));
});

it('the server agrees when every printed digit is the same, and a digest of other inputs is no disagreement', async () => {
  const raw = rawRun({ capture: tapped() });
  const digest = digestOf(canonicalText(raw));
  const analysis = analyseRun({ run: { digest, content: raw }, edits: [] });
  const { agreement } = await import('@/components/run/agreement');
  expect(agreement(analysis, structuredClone(analysis))).toBe('agrees');
  const { period_s } = analysis;
  const elsewhere = (by: number) => ({ ...analysis, period_s: { ...period_s!, value: period_s!.value + by } });
  expect(agreement(analysis, elsewhere(1e-15))).toBe('agrees');
  expect(agreement(analysis, elsewhere(period_s!.expanded_u))).toBe('differs');
  expect(agreement(analysis, { ...analysis, input_digest: 'f'.repeat(64) })).toBe('otherInputs');
});

it('a run is set aside with a reason and taken back, and its figures stay', async () => {
  const { wrapper, press, entry } = await openSheet({ capture: tapped(), amplitudes: tenDegrees });
  const { small_period_s, input_digest } = entry().analysis;
  const button = (name: string) => wrapper.findAll('button').find((one) => one.text() === name)!;
  await button('Set this run aside').trigger('click');
  await wrapper.get('.set-aside form').trigger('submit');
  expect(wrapper.get('.set-aside').text()).toContain('Say in a few words');
  await wrapper.get('.set-aside input').setValue(' bob hit the stand \ud83d');
  await wrapper.get('.set-aside form').trigger('submit');
  await eventually(() => expect(wrapper.get('.set-aside--out').text()).toContain('You: bob hit the stand'));
  expect(entry().setAside?.reason).toBe('bob hit the stand');
  expect(wrapper.get('.run-history').text()).toContain('Reason: bob hit the stand');
  expect(entry().analysis).toMatchObject({ small_period_s, input_digest });
  await press('Let it count again');
  await eventually(() => expect(entry().setAside).toBeNull());
});

it('saved as a file, a run with its edits reads back as it is here, for the command line too', async () => {
  const { wrapper, press, entry } = await openSheet({ capture: tappedWithDouble(), amplitudes: tenDegrees });
  await press('Leave out mark 9');
  const files: Blob[] = [];
  vi.spyOn(URL, 'createObjectURL').mockImplementation((file) => `blob:${files.push(file as Blob)}`);
  const names: string[] = [];
  vi.spyOn(HTMLAnchorElement.prototype, 'click').mockImplementation(function (this: HTMLAnchorElement) {
    names.push(this.download);
  });
  await wrapper
    .findAll('button')
    .find((button) => button.text() === 'Save this run as a file')!
    .trigger('click');
  await eventually(() => expect(files).toHaveLength(1));
  const [read] = readRunFile(await files[0]!.text());
  expect(names[0]).toMatch(/^swaymark-run-\d{4}-\d\d-\d\d\.json$/);
  expect(analyseRun(read!)).toEqual(entry().analysis);
  vi.restoreAllMocks();
});

it('folds of pictures are made when they are opened, not before', async () => {
  const { wrapper } = await openSheet({ capture: tapped(), amplitudes: tenDegrees });
  expect(foldOf(wrapper, 'The motion').text()).toBe('The motion');
  expect((await openFold(wrapper, 'The motion')).text()).toContain('through the lowest point at up to');
  expect((await openFold(wrapper, 'How the amplitude fell')).text()).toContain('In 20 swings the amplitude fell');
});

it('the decay fold asks for the end reading where there is none, and opens the form for it', async () => {
  const { wrapper, entry } = await openSheet({ capture: tapped(), amplitudes: tenDegrees.slice(0, 1) });
  const fold = await openFold(wrapper, 'How the amplitude fell');
  await fold
    .findAll('button')
    .find((button) => button.text() === 'Give the amplitude at the end')!
    .trigger('click');
  await flushPromises();
  const form = wrapper.find('form');
  expect(form.text()).toContain('At the end, swing 20');
  expect(document.activeElement!.closest('form')).toBe(form.element);
  expect(entry().edits).toEqual([]);
});

it('without an amplitude both folds say what reading would bring them', async () => {
  const { wrapper } = await openSheet({ capture: tapped() });
  for (const title of ['The motion', 'How the amplitude fell']) {
    const fold = await openFold(wrapper, title);
    expect(fold.text()).toContain('Give the amplitude at the start: how far out the bob swung.');
    expect(fold.find('figure').exists()).toBe(false);
  }
});
