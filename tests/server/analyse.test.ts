import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { Analysis } from '@shared/schemas/analysis';
import { exportRuns } from '@shared/schemas/runFile';
import { angleReading, rawEdits, rawKeyedRun, rawTapRun, sealed, stringRig, uuid } from '../factories/rawRuns';

// Each test starts a process of its own.
vi.setConfig({ testTimeout: 120_000 });

const tapRun = rawTapRun({ rig: stringRig(), amplitudes: [angleReading(0, 10), angleReading(20, 8)] });
const keyedRun = rawKeyedRun({ id: uuid(2) });
const entries = [
  { run: sealed(tapRun), edits: rawEdits(tapRun, { kind: 'leave_out_mark', mark: 4 }).map(sealed) },
  { run: sealed(keyedRun), edits: [] },
];
const good = exportRuns(entries);

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'swaymark-analyse-'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

function file(name: string, content: string): string {
  writeFileSync(join(folder, name), content);
  return join(folder, name);
}

/** The command as a script calls it. */
async function analyse(words: string[], input = '') {
  const child = spawn('npm', ['run', '--silent', 'analyse', '--', ...words], { stdio: 'pipe' });
  let [out, err] = ['', ''];
  child.stdout.on('data', (part: Buffer) => (out += part.toString()));
  child.stderr.on('data', (part: Buffer) => (err += part.toString()));
  child.stdin.end(input);
  const code = await new Promise<number | null>((done) => child.on('close', done));
  return { code, out, err };
}

test('prints what phone and server compute, every run with its edits, as one JSON list', async () => {
  const { code, out, err } = await analyse([file('good.json', good)]);
  expect([code, err]).toEqual([0, '']);
  const printed = JSON.parse(out) as unknown[];
  expect(printed).toEqual(JSON.parse(JSON.stringify(entries.map(analyseRun))));
  expect(Analysis.parse(printed[0]).marks_used).toBe(20);
});

test('takes several files, lists of plain runs and standard input, in that order', async () => {
  const plain = file('plain.json', JSON.stringify([keyedRun, tapRun]));
  const { code, out } = await analyse([plain, '-'], good);
  expect(code).toBe(0);
  const ids = (JSON.parse(out) as Analysis[]).map((analysis) => analysis.run_id);
  expect(ids).toEqual([keyedRun.id, tapRun.id, tapRun.id, keyedRun.id]);
});

test('a bad file among good ones: its name, line and field, exit code 2, and nothing on standard output', async () => {
  const bad = file('bad.json', JSON.stringify([tapRun, { ...keyedRun, amplitudes: 'ten' }], null, 1));
  const { code, out, err } = await analyse([file('good.json', good), bad]);
  expect([code, out]).toEqual([2, '']);
  expect(err).toMatch(/bad\.json, line \d+: 1\.amplitudes: expected array, saw string/);
});

test('a file that was cut off names the line where it ends', async () => {
  const half = good.slice(0, good.length - 200);
  const { code, out, err } = await analyse([file('half.json', half)]);
  expect([code, out]).toEqual([2, '']);
  expect(err).toContain(`half.json, line ${half.split('\n').length}: This is not whole JSON`);
});

test('an unknown version is refused with a way out', async () => {
  const { code, out, err } = await analyse(['-'], good.replace('"version": 1', '"version": 2'));
  expect([code, out]).toEqual([2, '']);
  expect(err).toMatch(/standard input, line 3: version: This file was written in version 2 .* Update the older/);
});

test('no file, or one that is not there: says what to do, exit code 2', async () => {
  expect(await analyse([])).toMatchObject({ code: 2, out: '', err: expect.stringMatching(/Name the files/) as string });
  const missing = await analyse([join(folder, 'nowhere.json')]);
  expect(missing).toMatchObject({ code: 2, out: '' });
  expect(missing.err).toMatch(/nowhere\.json: cannot be read \(ENOENT\)/);
});
