import {
  meanOf,
  name,
  number,
  operator,
  over,
  power,
  root,
  row,
  sub,
  sumOver,
  symbol
} from '$lib/views/formula-building';
import type { FormulaNode } from '$lib/views/formula';

export interface HelpFormula {
  readonly formula: FormulaNode;
  /** The same in a line of plain text. */
  readonly reading: string;
}

const equals = operator('=');
const times = operator('·');
const minus = operator('−');

/** The formulas of the help page, each with its reading in plain text. */
export const formulas = {
  external: {
    formula: row(name('m'), equals, name('x'), times, name('D'), times, over(name('V'), name('a'))),
    reading: 'm = x · D · V / a'
  },
  standardInVial: {
    formula: row(
      name('m'),
      equals,
      name('q'),
      times,
      symbol('c', 'IS'),
      times,
      name('D'),
      times,
      over(name('V'), name('a'))
    ),
    reading: 'm = q · c_IS · D · V / a'
  },
  standardInExtract: {
    formula: row(name('m'), equals, name('q'), times, over(symbol('m', 'IS'), name('a'))),
    reading: 'm = q · m_IS / a'
  },
  perLitre: {
    formula: row(name('m'), equals, name('c'), times, over(symbol('V', 'sample'), number('1000'))),
    reading: 'm = c · V_sample / 1000'
  },
  recovery: {
    formula: row(
      name('R'),
      equals,
      number('100'),
      operator(' '),
      over(row(name('m'), minus, meanOf('n')), symbol('m', 'spike'))
    ),
    reading: 'R = 100 (m − n̄) / m_spike'
  },
  methodRecovery: {
    formula: row(
      symbol('R', 'method'),
      equals,
      sumOver(row(name('f'), operator('∈'), name('method')), sub(name('R'), name('f')))
    ),
    reading: 'R_method = sum of R_f over the method fractions f'
  },
  meanInterval: {
    formula: row(
      meanOf('R'),
      operator('±'),
      sub(name('t'), row(number('0.975'), operator(','), name('n'), minus, number('1'))),
      times,
      over(name('s'), root(name('n')))
    ),
    reading: 'R̄ ± t(0.975, n − 1) · s / √n'
  },
  netVariance: {
    formula: row(
      power(symbol('s', 'net mean'), number('2')),
      equals,
      over(power(symbol('s', 'found'), number('2')), symbol('n', 'found')),
      operator('+'),
      over(power(symbol('s', 'native'), number('2')), symbol('n', 'native'))
    ),
    reading: 's_net² = s_found² / n_found + s_native² / n_native'
  },
  rsdInterval: {
    formula: row(
      over(
        name('k'),
        root(
          row(
            operator('('),
            over(row(name('u'), operator('+'), number('2')), name('n')),
            minus,
            number('1'),
            operator(')'),
            power(name('k'), number('2')),
            operator('+'),
            over(name('u'), row(name('n'), minus, number('1')))
          )
        )
      ),
      operator(','),
      operator(' '),
      name('k'),
      equals,
      over(name('s'), meanOf('R'))
    ),
    reading: 'k / √(((u + 2)/n − 1) k² + u/(n − 1)) with k = s / R̄'
  },
  stepRecovery: {
    formula: row(
      sub(name('y'), name('k')),
      equals,
      over(sub(name('R'), name('k')), sub(name('R'), row(name('k'), minus, number('1'))))
    ),
    reading: 'y_k = R_k / R_(k−1)'
  },
  lost: {
    formula: row(
      symbol('lost', 'k'),
      equals,
      number('100'),
      operator(' '),
      over(sub(name('R'), name('K')), sub(name('R'), name('k'))),
      operator('('),
      number('1'),
      minus,
      over(sub(name('R'), name('k')), sub(name('R'), row(name('k'), minus, number('1')))),
      operator(')')
    ),
    reading: 'lost_k = 100 (R_K / R_k)(1 − R_k / R_(k−1))'
  },
  downstream: {
    formula: row(
      name('downstream'),
      equals,
      sumOver(
        name('f'),
        row(
          sub(name('R'), name('f')),
          operator('('),
          over(
            number('1'),
            row(symbol('y', 'passed'), times, over(sub(name('R'), number('0')), number('100')))
          ),
          minus,
          number('1'),
          operator(')')
        )
      )
    ),
    reading: 'downstream = sum over fractions of f (1/(y_passed · R_0/100) − 1)'
  },
  rse: {
    formula: row(
      name('RSE'),
      equals,
      number('100'),
      root(
        over(
          sumOver(
            name('i'),
            power(
              row(
                operator('('),
                over(
                  row(sub(name('x'), name("i'")), minus, sub(name('x'), name('i'))),
                  sub(name('x'), name('i'))
                ),
                operator(')')
              ),
              number('2')
            )
          ),
          row(name('n'), minus, name('p'))
        )
      )
    ),
    reading: 'RSE = 100 √( Σ ((x′ − x)/x)² / (n − p) )'
  },
  detection: {
    formula: row(
      name('MDL'),
      equals,
      name('max'),
      operator('('),
      sub(name('t'), row(number('0.99'), operator(','), name('n'), minus, number('1'))),
      times,
      symbol('s', 'spiked'),
      operator(','),
      meanOf('b'),
      operator('+'),
      sub(name('t'), row(number('0.99'), operator(','), name('n'), minus, number('1'))),
      times,
      symbol('s', 'blanks'),
      operator(')')
    ),
    reading: 'MDL = max( t(0.99, n − 1) · s_spiked , b̄ + t(0.99, n − 1) · s_blanks )'
  },
  lineLimit: {
    formula: row(
      name('LOD'),
      equals,
      over(row(number('3.3'), times, name('σ')), name('b')),
      operator(','),
      name('LOQ'),
      equals,
      over(row(number('10'), times, name('σ')), name('b'))
    ),
    reading: 'LOD = 3.3 σ / b , LOQ = 10 σ / b'
  },
  halfRange: {
    formula: row(
      name('HR'),
      equals,
      sub(name('t'), row(number('0.995'), operator(','), name('n'), minus, number('1'))),
      times,
      name('s'),
      times,
      root(row(number('1'), operator('+'), over(number('1'), name('n'))))
    ),
    reading: 'HR = t(0.995, n − 1) · s · √(1 + 1/n)'
  },
  intermediate: {
    formula: row(
      power(symbol('s', 'I'), number('2')),
      equals,
      power(symbol('s', 'r'), number('2')),
      operator('+'),
      over(row(symbol('MS', 'between'), minus, symbol('MS', 'within')), sub(name('n'), number('0')))
    ),
    reading: 's_I² = s_r² + (MS_between − MS_within) / n_0'
  },
  rpd: {
    formula: row(
      name('RPD'),
      equals,
      number('200'),
      times,
      over(
        row(operator('|'), name('a'), minus, name('b'), operator('|')),
        row(name('a'), operator('+'), name('b'))
      )
    ),
    reading: 'RPD = 200 |a − b| / (a + b)'
  }
} as const satisfies Record<string, HelpFormula>;
