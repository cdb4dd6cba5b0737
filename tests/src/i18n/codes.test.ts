import { expect, it } from 'vitest';
import { i18n, loadTexts } from '@/i18n';
import { BudgetLine, CorrectionLine, MISSING } from '@shared/schemas/analysis';

await loadTexts();

it.each([
  ['run.result.needs', MISSING],
  ['bench.needs', MISSING],
  ['results.corrections.terms', CorrectionLine.shape.term.options],
  ['run.how.terms', BudgetLine.shape.term.options],
] as const)('%s has words for every code an analysis may carry', (stem, codes) => {
  const without = codes.filter((code) => !i18n.global.te(`${stem}.${code}`));
  expect(without).toEqual([]);
});
