import { expect, it } from 'vitest';
import { analysisOf } from '../../factories/analysis';
import { stripFinding, stripPoints, stripReach_ms } from '@/components/charts/residualStrip';
import { i18n, loadTexts } from '@/i18n';

await loadTexts();

const caption = (analysis: Parameters<typeof stripFinding>[0]) => {
  const { key, named } = stripFinding(analysis);
  return i18n.global.t(key, named, named.n ?? 1);
};

it('the caption names the one mark that stands out', () => {
  expect(caption(analysisOf([10, -20, 180, 5, -10]))).toBe('5 marks scatter by 40 ms; mark 2 is 180 ms late.');
  expect(caption(analysisOf([10, -20, -180, 5, -10]))).toBe('5 marks scatter by 40 ms; mark 2 is 180 ms early.');
});

it('the caption says so when no mark stands out', () => {
  expect(caption(analysisOf([40, -30, 20, 5, -40]))).toBe(
    '5 marks scatter by 40 ms around an even swing; none stands out.',
  );
});

it('the caption tells of open flags before anything else', () => {
  const flag = { code: 'double' as const, mark: 1, seen: {}, choices: [], answered: false };
  expect(caption(analysisOf([0, 300, 0], { flags: [flag] }))).toBe(
    '3 marks scatter by 40 ms; one of them carries an open flag.',
  );
  expect(caption(analysisOf([0, 300, 0], { flags: [{ ...flag, answered: true }] }))).toContain('300 ms late');
});

it('the caption says when there is no line', () => {
  expect(caption(analysisOf([0], { jitter_s: null }))).toBe('Too few marks to draw a line through.');
});

it('a mark left out stands where its time falls between its neighbours', () => {
  const analysis = analysisOf([0, 0, null, 0]);
  analysis.marks[2]!.time_s = 3;
  analysis.marks[3]!.swing = 2;
  analysis.marks[3]!.time_s = 4;
  const [, , out] = stripPoints(analysis);
  expect(out).toMatchObject({ isLeftOut: true, swing: 1.5, residual_ms: null });
});

it('a first mark left out stands before the start', () => {
  const analysis = analysisOf([null, 0, 0]);
  analysis.marks[1]!.swing = 0;
  analysis.marks[2]!.swing = 1;
  expect(stripPoints(analysis)[0]!.swing).toBeCloseTo(-1, 9);
});

it('flags stand at their mark, open until they are answered', () => {
  const flag = { code: 'double' as const, mark: 1, seen: {}, choices: [], answered: false };
  const [, open] = stripPoints(analysisOf([0, 0, 0], { flags: [flag] }));
  const [, closed] = stripPoints(analysisOf([0, 0, 0], { flags: [{ ...flag, answered: true }] }));
  expect([open!.flags, open!.isFlagOpen, closed!.isFlagOpen]).toEqual([['double'], true, false]);
});

it('the strip is high enough for its farthest mark and for the band', () => {
  expect(stripReach_ms(stripPoints(analysisOf([0, 300, 0])), 0.04)).toBeGreaterThan(300);
  expect(stripReach_ms(stripPoints(analysisOf([0, 10, 0])), 0.04)).toBeGreaterThan(80);
});
