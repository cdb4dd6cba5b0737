import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { exportRuns, readRunFile, RunFile, RunFileError } from '@shared/schemas/runFile';
import type { RawRun } from '@shared/schemas/run';
import { lineOfBreak, lineOfValue } from '@shared/schemas/locateJson';
import { anyRun } from '../../factories/anyRun';
import { rawEdits, rawKeyedRun, rawTapRun, sealed, uuid } from '../../factories/rawRuns';

const tapRun = rawTapRun();
const entries = [
  {
    run: sealed(tapRun),
    edits: rawEdits(tapRun, { kind: 'leave_out_mark', mark: 3 }, { kind: 'note', text: 'draught' }).map(sealed),
  },
  { run: sealed(rawKeyedRun({ id: uuid(2) })), edits: [] },
];

/** The error a text is refused with. */
function refusal(text: string): RunFileError {
  try {
    readRunFile(text);
  } catch (error) {
    if (error instanceof RunFileError) return error;
    throw error;
  }
  throw new Error('the text was taken');
}
/** The exported file with something changed in it, as an editor would leave it. */
const changed = (change: (file: RunFile) => void) => {
  const file = JSON.parse(exportRuns(entries)) as RunFile;
  change(file);
  return JSON.stringify(file, null, 1);
};
const lineWith = (text: string, part: string) => text.split('\n').findIndex((line) => line.includes(part)) + 1;

describe('exportRuns and readRunFile', () => {
  test('give back the runs, edits and digests that went in', () => {
    expect(readRunFile(exportRuns(entries))).toEqual(entries);
    expect(readRunFile(exportRuns([]))).toEqual([]);
  });

  test('do so for runs of every shape', () => {
    fc.assert(
      fc.property(anyRun, (run) => {
        expect(readRunFile(exportRuns([{ run: sealed(run), edits: [] }]))[0]!.run).toEqual(sealed(run));
      }),
      { numRuns: 40 },
    );
  });

  test('the file keeps its own schema, and white space in it does not matter', () => {
    const file = JSON.parse(exportRuns(entries)) as unknown;
    expect(RunFile.parse(file)).toEqual(file);
    expect(readRunFile(JSON.stringify(file))).toEqual(entries);
    expect(readRunFile(`\uFEFF${JSON.stringify(file, null, '\t').replace(/\n/g, '\r\n')}`)).toEqual(entries);
  });

  test('one plain run and a list of plain runs are taken too', () => {
    const [a, b] = [rawTapRun(), rawKeyedRun({ id: uuid(2) })];
    expect(readRunFile(JSON.stringify(a))).toEqual([{ run: sealed(a), edits: [] }]);
    expect(readRunFile(JSON.stringify([a, b])).map(({ run }) => run.content.id)).toEqual([a.id, b.id]);
  });
});

describe('what cannot be taken is refused with line and field', () => {
  test('a newer version, politely', () => {
    const text = changed((file) => Object.assign(file, { version: 2 }));
    const { message, line, field } = refusal(text);
    expect(message).toMatch(/version 2 of swaymark-runs, and version 1 is read here/);
    expect([line, field]).toEqual([lineWith(text, '"version": 2'), 'version']);
  });

  test('a newer version of a run inside', () => {
    const text = changed((file) => Object.assign(file.runs[1]!.run.raw, { version: 7 }));
    // Its digest is that of other bytes now, and that is found first.
    expect(refusal(text)).toMatchObject({ field: 'runs.1.run.digest' });
    const plain = JSON.stringify({ ...rawTapRun(), version: 7 }, null, 1);
    expect(refusal(plain)).toMatchObject({ field: 'version', line: lineWith(plain, '"version": 7') });
  });

  test('a field that is not as the format says', () => {
    const plain = JSON.stringify([rawTapRun(), { ...rawTapRun(), note: 5 }], null, 1);
    expect(refusal(plain)).toMatchObject({ field: '1.note', line: lineWith(plain, '"note": 5') });
  });

  test('a missing field: the line of what it is missing from', () => {
    const rest: Partial<RawRun> = rawTapRun();
    delete rest.made;
    const plain = JSON.stringify(rest, null, 1);
    expect(refusal(plain)).toMatchObject({ field: 'made', line: 1, message: 'is missing' });
  });

  test('marks that do not rise', () => {
    const run = rawTapRun();
    const plain = JSON.stringify({ ...run, capture: { ...run.capture, mark_us: [0, 5, 5] } }, null, 1);
    expect(refusal(plain)).toMatchObject({
      field: 'capture.mark_us',
      line: lineWith(plain, 'mark_us'),
      message: 'marks must rise',
    });
  });

  test('a text that was cut off: where it ends', () => {
    const text = exportRuns(entries);
    const half = text.slice(0, text.length / 2);
    expect(refusal(half)).toMatchObject({
      line: half.split('\n').length,
      message: expect.stringMatching(/cut off/) as string,
    });
    expect(refusal('')).toMatchObject({ line: 1, message: 'This is empty.' });
  });

  test('a run that is not the one its digest was taken of', () => {
    const text = changed((file) => Object.assign(file.runs[0]!.run.raw, { note: 'later' }));
    expect(refusal(text)).toMatchObject({ field: 'runs.0.run.digest', line: lineWith(text, '"digest"') });
  });

  test('a file from which a run was taken out', () => {
    expect(refusal(changed((file) => file.runs.pop()))).toMatchObject({ field: 'digest' });
  });

  test('an edit of another run', () => {
    const text = changed((file) => {
      const other = sealed(rawEdits({ id: uuid(9) }, { kind: 'note', text: 'x' })[0]!);
      file.runs[0]!.edits[0] = { id: other.content.id, run_id: uuid(9), digest: other.digest, raw: other.content };
    });
    expect(refusal(text)).toMatchObject({ field: 'runs.0.edits.0.run_id' });
  });

  test('other JSON', () => {
    expect(refusal('{"a": 1}').message).toMatch(/holds no runs/);
    expect(refusal('17').message).toMatch(/holds no runs/);
    expect(refusal('[\n null\n]')).toMatchObject({ line: 2, field: '0.format' });
  });

  test('any text at all: runs or a RunFileError, nothing else', () => {
    fc.assert(
      fc.property(fc.oneof(fc.string(), fc.json()), (text) => {
        let taken: unknown[] = [];
        try {
          taken = readRunFile(text);
        } catch (error) {
          expect(error).toBeInstanceOf(RunFileError);
        }
        // An empty list is the only random text that holds no run and no mistake.
        expect(taken).toEqual([]);
      }),
      {
        examples: [
          ['['.repeat(100_000)],
          ['{"format":"swaymark-runs","version":1,"runs":[{"run":{"raw":"\\ud800"}}]}'],
        ],
      },
    );
  });
});

describe('lines in a JSON text', () => {
  const text = '{\n  "a": [1,\n 2, {"b":\n null}],\n"a.b": "\\n"}';
  test.each([
    [[], 1],
    [['a'], 2],
    [['a', 1], 3],
    [['a', 2, 'b'], 4],
    [['a', 2, 'c'], 3],
    [['a.b'], 5],
  ])('%j stands in line %i', (path, line) => {
    expect(lineOfValue(text, path)).toBe(line);
  });

  test('lineOfBreak agrees with JSON.parse on what is whole', () => {
    fc.assert(
      fc.property(fc.json(), fc.nat(), fc.string({ maxLength: 2 }), (json, at, put) => {
        const bent = json.slice(0, at % (json.length + 1)) + put + json.slice(at % (json.length + 1));
        for (const one of [json, bent]) {
          let isWhole = true;
          try {
            JSON.parse(one);
          } catch {
            isWhole = false;
          }
          expect(lineOfBreak(one) === undefined).toBe(isWhole);
        }
      }),
      { numRuns: 500 },
    );
  });
});
