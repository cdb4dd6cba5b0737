import type { RunView } from './runView';

/**
 * The column that tells passes one way from those the other, for a linear model of the marks in force: none
 * when they are all of one kind.
 */
export function waysOf({ marks, swingsPerMark }: RunView): number[][] {
  if (swingsPerMark !== 0.5) return [];
  const used = marks.filter((mark) => mark.swing !== null);
  return [used.map(({ swing }) => Number(Math.round(2 * swing!) % 2 === 1))];
}
