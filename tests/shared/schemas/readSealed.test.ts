import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import { FormatError, readEdit, readRun } from '@shared/schemas/readSealed';
import { anyRun } from '../../factories/anyRun';
import { rawEdit, rawTapRun } from '../../factories/rawRuns';

function refusal(text: string, digest = digestOf(text), read: (text: string, digest: string) => unknown = readRun) {
  try {
    read(text, digest);
  } catch (error) {
    if (error instanceof FormatError) return error;
    throw error;
  }
  throw new Error('was taken');
}
const text = (change: object = {}) => canonicalText({ ...rawTapRun({ times: [0, 2, 4] }), ...change });

describe('readRun and readEdit', () => {
  test('give back any sealed run', () => {
    fc.assert(
      fc.property(anyRun, (run) => {
        const raw = canonicalText(run);
        expect(readRun(raw, digestOf(raw))).toEqual(run);
      }),
      { numRuns: 50 },
    );
  });

  test('give back a sealed edit', () => {
    const edit = rawEdit(rawTapRun(), { kind: 'leave_out_mark', mark: 3 });
    const raw = canonicalText(edit);
    expect(readEdit(raw, digestOf(raw))).toEqual(edit);
  });

  test.each([
    ['digest_differs', text(), digestOf('something else')],
    ['not_json', text().slice(0, -20), undefined],
    ['not_json', '[]', undefined],
    ['unknown_format', text({ format: 'something-else' }), undefined],
    ['unknown_version', text({ version: 2 }), undefined],
    ['fields', text({ surprise: 1 }), undefined],
    ['not_canonical', JSON.stringify(JSON.parse(text()), null, 1), undefined],
    ['not_canonical', text({ note: ' spaces around ' }), undefined],
    ['too_large', text({ note: 'x'.repeat(200_001) }), undefined],
  ])('refuse with %s', (code, raw, digest) => {
    expect(refusal(raw, digest).code).toBe(code);
  });

  test('name the fields that are not as the format says', () => {
    const { code, fields } = refusal(text({ capture: { ...rawTapRun().capture, mark_us: [0, 5, 5] } }));
    expect(code).toBe('fields');
    expect(fields).toEqual([{ path: 'capture.mark_us', message: 'marks must rise' }]);
  });

  test('tell an edit from a run', () => {
    expect(refusal(text(), undefined, readEdit).code).toBe('unknown_format');
  });

  test('say of a newer version what to do', () => {
    expect(refusal(text({ version: 7 })).message).toContain('version 7');
    expect(refusal(text({ version: 7 })).message).toContain('stays safe');
  });
});
