import { describe, expect, it } from 'vitest';
import { atomsOf, sameFormula } from '../../../src/lib/server/services/chemistry/formula-match';

describe('sameFormula', () => {
  it.each([
    ['C8H9D5ClN5', 'C8H9ClD5N5', true],
    ['C8H9(2H)5ClN5', 'C8H9D5ClN5', true],
    ['C8H9[2H]5ClN5', 'C8H9D5ClN5', true],
    ['C2H6O', 'CH3CH2OH', true],
    ['(CH3)2CO', 'C3H6O', true],
    ['C16H22ClNO2', 'C16H21NO2 · HCl', true],
    ['CuSO4 · 5 H2O', 'CuSO9H10', true],
    ['C4H12N+', 'C4H12N', true],
    ['SO4 2-', 'O4S', true],
    ['C8H10-', 'C8H10', true],
    ['C₂H₆O', 'C2H6O', true],
    ['Co', 'CO', false],
    ['C7H8O', 'C7H9O', false]
  ])('%s and %s: %s', (one, other, same) => {
    expect(sameFormula(one, other)).toBe(same);
  });

  it.each(['about 100', 'C2H6O)', '(C2H6', '', 'c2h6o'])('says of %o that it is no formula', (text) => {
    expect(atomsOf(text)).toBeNull();
    expect(sameFormula(text, 'C2H6O')).toBeNull();
  });
});
