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
  symbol
} from '../../../../views/formula-building';
import type { StatedFormula } from './formulas';

const equals = operator('=');
const times = operator('·');
const plus = operator('+');
const minus = operator('−');

const quantile = (share: string) =>
  sub(name('t'), row(name('n'), minus, number('1'), operator(','), number(share)));

export const detectionFormula: StatedFormula = {
  formula: row(
    name('MDL'),
    equals,
    name('max'),
    operator('('),
    quantile('0.99'),
    times,
    symbol('s', 'spiked'),
    operator(','),
    meanOf('b'),
    plus,
    quantile('0.99'),
    times,
    symbol('s', 'blanks'),
    operator(')')
  ),
  reading: 'MDL = max( t(n − 1, 0.99) · s_spiked , b̄ + t(n − 1, 0.99) · s_blanks )'
};

export const confirmationFormula: StatedFormula = {
  formula: row(
    name('HR'),
    equals,
    quantile('0.995'),
    times,
    name('s'),
    times,
    root(row(number('1'), plus, over(number('1'), name('n'))))
  ),
  reading: 'HR = t(n − 1, 0.995) · s · √(1 + 1/n)'
};

export const precisionFormula: StatedFormula = {
  formula: row(
    symbol('s', 'I'),
    equals,
    root(row(power(symbol('s', 'r'), number('2')), plus, power(symbol('s', 'b'), number('2'))))
  ),
  reading: 's_I = √(s_r² + s_b²)'
};

export const controlFormula: StatedFormula = {
  formula: row(meanOf('p'), operator('±'), number('3'), times, name('s')),
  reading: 'p̄ ± 3 s'
};

export const duplicateFormula: StatedFormula = {
  formula: row(
    name('RPD'),
    equals,
    number('200'),
    times,
    over(row(operator('|'), name('a'), minus, name('b'), operator('|')), row(name('a'), plus, name('b')))
  ),
  reading: 'RPD = 200 |a − b| / (a + b)'
};
