import {
  meanOf,
  name,
  number,
  operator,
  over,
  power,
  row,
  sub,
  sumOver,
  symbol
} from '../../../../views/formula-building';
import type { FormulaNode } from '../../../../views/formula';
import type { FormulaId } from '../../../amounts/injection-amount';
import type { FitChoice } from '../../../amounts/types';

/** A formula as data, with its reading in a line of text. */
export interface StatedFormula {
  readonly formula: FormulaNode;
  readonly reading: string;
}

const equals = operator('=');
const times = operator('·');
const minus = operator('−');
const plus = operator('+');
const hundred = number('100');

/** How one injection became an amount. */
export const amountFormulas: Readonly<Record<FormulaId, StatedFormula>> = {
  external: {
    formula: row(name('m'), equals, name('x'), times, name('DF'), times, over(name('V'), name('a'))),
    reading: 'm = x · DF · V / a'
  },
  'standard in the vial': {
    formula: row(
      name('m'),
      equals,
      name('q'),
      times,
      symbol('c', 'is'),
      times,
      name('DF'),
      times,
      over(name('V'), name('a'))
    ),
    reading: 'm = q · c_is · DF · V / a'
  },
  'standard in the extract': {
    formula: row(name('m'), equals, name('q'), times, over(symbol('m', 'is'), name('a'))),
    reading: 'm = q · m_is / a'
  },
  'standard in the sample': {
    formula: row(symbol('m', 'relative'), equals, name('q'), times, symbol('m', 'added')),
    reading: 'm_relative = q · m_added'
  },
  'reported in the vial': {
    formula: row(name('m'), equals, name('x'), times, name('DF'), times, over(name('V'), name('a'))),
    reading: 'm = x · DF · V / a'
  },
  'reported amount': {
    formula: row(name('m'), equals, symbol('m', 'reported')),
    reading: 'm = m as reported'
  },
  'reported per litre': {
    formula: row(name('m'), equals, name('c'), times, over(symbol('V', 'sample'), number('1000'))),
    reading: 'm = c · V_sample / 1000'
  }
};

/** Method recovery: summed over the method fractions per replicate, then averaged. */
export function recoveryFormula(subtracts: boolean, several: boolean): StatedFormula {
  const found = subtracts
    ? row(sub(name('m'), name('f')), minus, sub(meanOf('n'), name('f')))
    : sub(name('m'), name('f'));
  const single = subtracts ? row(name('m'), minus, meanOf('n')) : name('m');
  const above = several
    ? sumOver(name('f'), subtracts ? row(operator('('), found, operator(')')) : found)
    : single;
  const m = several ? 'Σ_f (m_f' : '(m';
  return {
    formula: row(name('R'), equals, hundred, operator(' '), over(above, symbol('m', 'spike'))),
    reading: `R = 100 ${m}${subtracts ? (several ? ' − n̄_f' : ' − n̄') : ''}) / m_spike`
  };
}

export const portionFormula: StatedFormula = {
  formula: row(name('p'), equals, hundred, operator(' '), over(name('m'), symbol('m', 'added'))),
  reading: 'p = 100 m / m_added'
};

export const relativeFormula: StatedFormula = {
  formula: row(
    symbol('R', 'relative'),
    equals,
    hundred,
    operator(' '),
    over(row(name('q'), times, symbol('m', 'added'), minus, meanOf('n')), symbol('m', 'spike'))
  ),
  reading: 'R_relative = 100 (q · m_added − n̄) / m_spike'
};

export const lossFormula: StatedFormula = {
  formula: row(
    symbol('lost', 'k'),
    equals,
    hundred,
    operator(' '),
    over(symbol('R', 'K'), symbol('R', 'k')),
    operator('('),
    number('1'),
    minus,
    over(symbol('R', 'k'), symbol('R', 'k−1')),
    operator(')')
  ),
  reading: 'lost_k = 100 (R_K / R_k) (1 − R_k / R_k−1)'
};

export const signalFormula: StatedFormula = {
  formula: row(symbol('R', '0'), equals, hundred, operator(' '), over(name('m'), symbol('m', 'standard'))),
  reading: 'R_0 = 100 m / m_standard'
};

export const openFormula: StatedFormula = {
  formula: row(
    name('open'),
    equals,
    hundred,
    minus,
    sumOver(
      name('f'),
      over(
        sub(name('R'), name('f')),
        row(sub(name('y'), name('f')), times, symbol('R', '0'), operator('/'), hundred)
      )
    )
  ),
  reading: 'open = 100 − Σ_f R_f / (y_f · R_0 / 100)'
};

export const matrixFormula: StatedFormula = {
  formula: row(name('ME'), equals, hundred, operator(' '), over(row(name('B'), minus, name('U')), name('A'))),
  reading: 'ME = 100 (B − U) / A'
};

/** The line of a calibration: y the response, x the concentration or the ratio q. */
export function lineFormula(choice: Pick<FitChoice, 'model'>): StatedFormula {
  const y = name('y');
  const x = name('x');
  switch (choice.model) {
    case 'average response factor':
      return { formula: row(y, equals, meanOf('k'), times, x), reading: 'y = k̄ · x' };
    case 'linear':
      return {
        formula: row(y, equals, sub(name('b'), number('0')), plus, sub(name('b'), number('1')), times, x),
        reading: 'y = b0 + b1 · x'
      };
    case 'quadratic':
      return {
        formula: row(
          y,
          equals,
          sub(name('b'), number('0')),
          plus,
          sub(name('b'), number('1')),
          times,
          x,
          plus,
          sub(name('b'), number('2')),
          times,
          power(x, number('2'))
        ),
        reading: 'y = b0 + b1 · x + b2 · x²'
      };
  }
}
