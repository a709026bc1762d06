import { name, number, operator, over, power, row, sub, symbol, words } from '$lib/views/formula-building';
import type { FormulaNode } from '$lib/views/formula';
import type { HelpFormula } from '../figures/formulas';

const equals = operator('=');
const minus = operator('−');
const plus = operator('+');
const open = operator('(');
const shut = operator(')');

const product = (over: string, of: FormulaNode): FormulaNode => row(sub(operator('∏'), words(over)), of);
/** 1 over 1 + 10 to the difference of two names. */
const unionised = (first: string, second: string): FormulaNode =>
  over(number(1), row(number(1), plus, power(number(10), row(name(first), minus, name(second)))));
const gammaOf = (shape: FormulaNode): FormulaNode =>
  row(name('P'), open, shape, operator(','), name('x'), shut);

/** The formulas of the chemistry page, each with its reading in plain text. */
export const formulas = {
  neutralShare: {
    formula: row(
      symbol('f', 'n'),
      equals,
      product('acids', unionised('pH', 'pKa')),
      product('bases', unionised('pKa', 'pH'))
    ),
    reading:
      'f_n = product over acids of 1/(1 + 10^(pH − pKa)) times product over bases of 1/(1 + 10^(pKa − pH))'
  },
  logD: {
    formula: row(name('log D'), equals, symbol('log K', 'ow'), plus, name('log'), symbol('f', 'n')),
    reading: 'log D = log Kow + log f_n'
  },
  retention: {
    formula: row(
      symbol('V', 'R'),
      equals,
      symbol('V', 'M'),
      open,
      number(1),
      plus,
      symbol('k', 'w'),
      symbol('f', 'n'),
      shut
    ),
    reading: 'V_R = V_M (1 + k_w f_n)'
  },
  loss: {
    formula: row(
      name('b'),
      equals,
      gammaOf(name('N')),
      minus,
      over(name('N'), name('x')),
      gammaOf(row(name('N'), plus, number(1))),
      operator(', '),
      name('x'),
      equals,
      over(row(name('N'), name('V')), symbol('V', 'R'))
    ),
    reading: 'b = P(N, x) − (N/x) P(N + 1, x), x = N V / V_R'
  }
} satisfies Record<string, HelpFormula>;
