import fc from 'fast-check';
import { expect, test } from 'vitest';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import { readEdit, readRun } from '@shared/schemas/readSealed';
import { wellFormed, wellFormedContent } from '@shared/schemas/wellFormed';
import { rawEdit, rawKeyedRun, stringRig } from '../../factories/rawRuns';

test.each([
  ['windy \ud83d', 'windy'],
  ['\udca8 windy', 'windy'],
  ['a\ud83db', 'ab'],
  ['windy \ud83d\udca8', 'windy \ud83d\udca8'],
  [' as typed ', ' as typed '],
])('%j is kept as %j', (typed, kept) => expect(wellFormed(typed)).toBe(kept));

test('is what the language itself calls well formed, and changes nothing that is', () => {
  const anyText = fc.string({ unit: fc.constantFrom('a', ' ', '\ud83d', '\udca8', 'é') });
  fc.assert(
    fc.property(anyText, (text) => {
      // encodeURIComponent throws on a lone surrogate (ECMA-262, 19.2.6.5).
      expect(() => encodeURIComponent(wellFormed(text))).not.toThrow();
      expect(wellFormed(wellFormed(text))).toBe(wellFormed(text));
    }),
  );
});

test('a run and an edit with half a character anywhere can be read by the server', () => {
  const sealedText = (content: object) => {
    const text = canonicalText(wellFormedContent(content));
    return [text, digestOf(text)] as const;
  };
  const run = rawKeyedRun({ note: 'draught \ud83d', rig: stringRig({ label: '\udca8 long' }) });
  expect(readRun(...sealedText(run))).toMatchObject({ note: 'draught', rig: { label: 'long' } });
  const edit = rawEdit(run, { kind: 'note', text: 'a \ud83d' }, { reason: '\ud83d' });
  expect(readEdit(...sealedText(edit))).toMatchObject({ change: { text: 'a' }, reason: '' });
});
