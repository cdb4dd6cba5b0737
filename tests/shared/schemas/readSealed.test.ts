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
    ['not_canonical', text({ note: 'half a sign \ud83e' }), undefined],
    ['fields', text({ id: rawTapRun().id.replace('01900000', '0190000A') }), undefined],
    ['unknown_format', '{"format":{"toString":1,"valueOf":1}}', undefined],
    ['unknown_format', `{"format":${'['.repeat(90_000)}${']'.repeat(90_000)}}`, undefined],
    ['unknown_version', text({ version: null }), undefined],
    ['unknown_version', text().replace('"version":1', '"version":{"toString":null}'), undefined],
    ['too_large', text({ note: 'x'.repeat(200_001) }), undefined],
  ])('refuse with %s', (code, raw, digest) => {
    expect(refusal(raw, digest).code).toBe(code);
  });

  test('name the fields that are not as the format says', () => {
    const { code, fields } = refusal(text({ capture: { ...rawTapRun().capture, mark_us: [0, 5, 5] } }));
    expect(code).toBe('fields');
    expect(fields).toEqual([{ path: 'capture.mark_us', message: 'marks must rise' }]);
  });

  test('take a note in which a surrogate is only spelled out', () => {
    const raw = text({ note: 'a backslash and ud83e: \\ud83e, and a whole sign 🦊' });
    expect(readRun(raw, digestOf(raw)).note).toContain('\\ud83e');
  });

  test('name twenty fields at most', () => {
    const mark_us = Array.from({ length: 1_000 }, (_, i) => i + 0.5);
    expect(refusal(text({ capture: { ...rawTapRun().capture, mark_us } })).fields).toHaveLength(20);
  });

  test('show of an unknown version no more than its beginning', () => {
    expect(refusal(text({ version: 'v'.repeat(1_000) })).message.length).toBeLessThan(250);
  });

  test('tell an edit from a run', () => {
    expect(refusal(text(), undefined, readEdit).code).toBe('unknown_format');
  });

  test('say of a newer version what to do', () => {
    expect(refusal(text({ version: 7 })).message).toContain('version 7');
    expect(refusal(text({ version: 7 })).message).toContain('stays safe');
  });
});
