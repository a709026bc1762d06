/**
 * A formula as plain data, so that the server can send one with a figure and the page can set it in
 * mathematical notation without trusting markup.
 */
export type FormulaNode =
  | { readonly kind: 'name'; readonly text: string; readonly bar?: boolean }
  | { readonly kind: 'number'; readonly text: string }
  | { readonly kind: 'operator'; readonly text: string }
  | { readonly kind: 'words'; readonly text: string }
  | { readonly kind: 'row'; readonly items: readonly FormulaNode[] }
  | { readonly kind: 'sub'; readonly base: FormulaNode; readonly sub: FormulaNode }
  | { readonly kind: 'super'; readonly base: FormulaNode; readonly super: FormulaNode }
  | { readonly kind: 'fraction'; readonly over: FormulaNode; readonly under: FormulaNode }
  | { readonly kind: 'root'; readonly of: FormulaNode }
  | { readonly kind: 'sum'; readonly index: FormulaNode; readonly of: FormulaNode };
