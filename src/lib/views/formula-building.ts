import type { FormulaNode } from './formula';

/** Short hands for writing formulas as data: `row(name('R'), operator('='), ...)`. */
export const name = (text: string): FormulaNode => ({ kind: 'name', text });
/** A mean: the name with a bar over it. */
export const meanOf = (text: string): FormulaNode => ({ kind: 'name', text, bar: true });
export const number = (text: string | number): FormulaNode => ({ kind: 'number', text: String(text) });
export const operator = (text: string): FormulaNode => ({ kind: 'operator', text });
export const words = (text: string): FormulaNode => ({ kind: 'words', text });
export const row = (...items: readonly FormulaNode[]): FormulaNode => ({ kind: 'row', items });
export const sub = (base: FormulaNode, below: FormulaNode): FormulaNode => ({
  kind: 'sub',
  base,
  sub: below
});
export const power = (base: FormulaNode, above: FormulaNode): FormulaNode => ({
  kind: 'super',
  base,
  super: above
});
export const over = (above: FormulaNode, below: FormulaNode): FormulaNode => ({
  kind: 'fraction',
  over: above,
  under: below
});
export const root = (of: FormulaNode): FormulaNode => ({ kind: 'root', of });
export const sumOver = (index: FormulaNode, of: FormulaNode): FormulaNode => ({ kind: 'sum', index, of });
/** A symbol with a word below it: `symbol('m', 'spike')`. */
export const symbol = (base: string, below: string): FormulaNode => sub(name(base), words(below));
