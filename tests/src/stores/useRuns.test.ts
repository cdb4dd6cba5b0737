import 'fake-indexeddb/auto';
import { flushPromises } from '@vue/test-utils';
import { afterEach, expect, it, vi } from 'vitest';
import { mountPage } from '../support/mountApp';
import { json, plugIn } from '../support/network';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import { CLASS_ID, rawEdit, rawRun, turnedDown } from '../support/samples';
import BenchPage from '@/pages/BenchPage.vue';
import HandInPage from '@/pages/HandInPage.vue';
import { applyVerdicts } from '@/db/outbox';
import type { LocalStore } from '@/db/localStore';
import { addEdit, addRun } from '@/db/runs';
import { useHandInLines } from '@/composables/useHandInLines';
import { runLine } from '@/components/desk/runLines';
import { useRuns } from '@/stores/useRuns';
import { useSession } from '@/stores/useSession';
import { eventually } from '../../support/eventually';

const HERE = { class_id: CLASS_ID, bench: 3 };
plugIn(() => json({ me: null }));
let close: () => void = () => undefined;
let store: LocalStore;

async function openPage(page: Parameters<typeof mountPage>[0]) {
  const { wrapper } = await mountPage(page, '/bench');
  close = () => wrapper.unmount();
  await useSession().ready;
  store = useSession().store!;
  await Promise.all([store.runs.clear(), store.edits.clear()]);
  return wrapper;
}
afterEach(() => {
  vi.restoreAllMocks();
  close();
});

const swings = (runId: string) => useRuns().entry(runId)?.analysis.swings;
const refuse = (type: 'run' | 'edit', row: { id: string; digest: string }) =>
  applyVerdicts(store, [turnedDown('refused', { type, id: row.id, digest: row.digest })]);

const sealed = (raw: string) => ({ raw, digest: digestOf(raw) });

it.each([
  ['was damaged', { raw: canonicalText(rawRun({ note: 'other' })) }],
  ['is cut off', sealed('{"format":"swaymark-run"')],
  ['is nothing', sealed('null')],
  ['is no run', sealed('{}')],
  ['is of a later format', sealed('{"format":"swaymark-run","version":2}')],
])('a run whose text %s stands beside the others, to be saved as it is', async (_how, text) => {
  const page = await openPage(BenchPage);
  const good = await addRun(store, rawRun(), HERE);
  const bad = await addRun(store, rawRun(), HERE);
  await store.runs.update(bad.id, text);
  await eventually(() => expect(useRuns().unreadable.map(({ row }) => row.id)).toEqual([bad.id]));
  expect(useRuns().entries.map(({ row }) => row.id)).toEqual([good.id]);
  await flushPromises();
  expect(page.findAll('.run-line')).toHaveLength(1);
  expect(page.get('.unreadable-rows').text()).toContain('Cannot be read on this device');

  const saved: Blob[] = [];
  vi.spyOn(URL, 'createObjectURL').mockImplementation((blob) => {
    saved.push(blob as Blob);
    return 'blob:kept';
  });
  await page.get('.unreadable-rows button').trigger('click');
  expect(await saved[0]!.text()).toBe(text.raw);
});

it('a run that alone is there and cannot be read is not called nothing', async () => {
  const page = await openPage(HandInPage);
  const bad = await addRun(store, rawRun(), HERE);
  await store.runs.update(bad.id, { raw: '{' });
  await eventually(() => expect(page.find('.unreadable-rows').exists()).toBe(true));
  expect(page.text()).not.toContain('Nothing to hand in yet');
});

it('an edit that cannot be read is left out of force and counted, and its run stays', async () => {
  await openPage(BenchPage);
  const run = await addRun(store, rawRun(), HERE);
  const edit = await addEdit(store, rawEdit(run.id, { kind: 'set_swings', swings: 31 }));
  await eventually(() => expect(swings(run.id)).toBe(31));
  await store.edits.update(edit.id, { raw: '{}' });
  await eventually(() => expect(swings(run.id)).toBe(20));
  expect(useRuns().entry(run.id)!.unreadableEdits).toBe(1);
  expect(useHandInLines().unreadable.value.map(({ row }) => row.id)).toEqual([edit.id]);
});

it('a refused edit stays in the history and counts no more, nor does its undoing', async () => {
  await openPage(BenchPage);
  const run = await addRun(store, rawRun(), HERE);
  const first = await addEdit(store, rawEdit(run.id, { kind: 'set_swings', swings: 31 }));
  const undo = await addEdit(store, rawEdit(run.id, { kind: 'withdraw', edit_id: first.id }));
  await eventually(() => expect(swings(run.id)).toBe(20));
  await refuse('edit', undo);
  await eventually(() => expect(swings(run.id)).toBe(31));
  expect(useRuns().entry(run.id)!.edits).toHaveLength(2);
});

it('edits of a refused run go on counting here, for nobody else has any of it', async () => {
  await openPage(BenchPage);
  const run = await addRun(store, rawRun(), HERE);
  const edit = await addEdit(store, rawEdit(run.id, { kind: 'set_swings', swings: 31 }));
  await refuse('run', run);
  await refuse('edit', edit);
  await eventually(() => expect(useRuns().entry(run.id)?.row.state).toBe('refused'));
  expect(swings(run.id)).toBe(31);
});

it('the Desk lists the server’s analysis while nothing waits here, refused edits or not', async () => {
  await openPage(BenchPage);
  const run = await addRun(store, rawRun(), HERE);
  const edit = await addEdit(store, rawEdit(run.id, { kind: 'set_swings', swings: 31 }));
  await eventually(() => expect(swings(run.id)).toBe(31));
  const analysis = { ...useRuns().entry(run.id)!.analysis, swings: 77 };
  await store.analyses.put({ run_id: run.id, input_digest: analysis.input_digest, server_seq: 1, analysis });
  const listed = () => runLine(useRuns().entry(run.id)!).swings;
  await eventually(() => expect(useRuns().entry(run.id)!.official).not.toBeNull());
  expect(listed()).toBe(31);
  await refuse('edit', edit);
  await eventually(() => expect(listed()).toBe(77));
});
