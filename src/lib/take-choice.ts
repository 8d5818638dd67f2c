import { takeRows, type TakeMode } from './selection.ts';

/** How a plot says rows were chosen. */
interface Choice {
  by: 'lasso' | 'box' | 'click' | 'rule' | 'legend' | 'clear';
  mode: TakeMode;
}

const WORDS: Record<Choice['by'], string> = {
  lasso: 'drawn by lasso',
  box: 'taken by box',
  click: 'taken one by one',
  rule: 'taken by rule',
  legend: 'taken by the legend',
  clear: '',
};

/** Hands what was chosen in a plot to the one selection: `<Scatter onSelect={takeChoice}>`. */
export function takeChoice(rows: readonly number[], { by, mode }: Choice): void {
  takeRows(rows, WORDS[by], mode);
}
