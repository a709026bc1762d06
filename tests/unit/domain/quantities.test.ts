import { describe, expect, test } from 'vitest';
import { readNumber } from '../../../src/lib/domain/numbers';
import { readQuantity, type KeptUnit } from '../../../src/lib/domain/quantities';

describe('a typed number', () => {
  test.each([
    ['5', 5],
    ['5.25', 5.25],
    ['5,25', 5.25],
    ['0,125', 0.125],
    ['.5', 0.5],
    ['1e3', 1000],
    ['2.5E-3', 0.0025],
    ['1 234,5', 1234.5],
    ['1\u202f234', 1234],
    ["12'345", 12345],
    ['1,234.5', 1234.5],
    ['1.234,5', 1234.5],
    ['1,234,567', 1234567],
    ['-3', -3],
    ['\u22123,5', -3.5],
    ['１２', 12]
  ])('%s is %d', (text, value) => {
    expect(readNumber(text)).toEqual({ ok: true, value });
  });

  test('with two readings is refused, and both are offered', () => {
    expect(readNumber('1,234')).toEqual({
      ok: false,
      message: "'1,234' can be read as 1.234 or as 1234. Write one of these."
    });
  });

  test.each(['', ' ', '12O', '1.2.3', '1,2,3', '--1', '1 2', 'ND', '1e999', 'NaN', 'Infinity', '0x10'])(
    '%s is refused',
    (text) => {
      expect(readNumber(text).ok).toBe(false);
    }
  );
});

describe('a typed quantity', () => {
  // SI prefixes: BIPM, The International System of Units, 9th edition (2019), table 7.
  test.each<[string, KeptUnit, number]>([
    ['200', 'ng', 200],
    ['0,3 µg', 'ng', 300],
    ['0.3 μg', 'ng', 300],
    ['2ug', 'ng', 2000],
    ['1 mg', 'ng', 1e6],
    ['500 pg', 'ng', 0.5],
    ['1e3 pg', 'ng', 1],
    ['1 L', 'mL', 1000],
    ['1 l', 'mL', 1000],
    ['250 µL', 'mL', 0.25],
    ['100 ml', 'mL', 100],
    ['5 µg/L', 'ng/mL', 5],
    ['5 ug/l', 'ng/mL', 5],
    ['5 ng/L', 'ng/mL', 0.005],
    ['2,5 mg/L', 'ng/mL', 2500],
    ['1 ng/uL', 'ng/mL', 1000],
    ['1 h', 'min', 60],
    ['90 s', 'min', 1.5],
    ['250 mg', 'g', 0.25]
  ])('%s in %s is %d', (text, unit, value) => {
    expect(readQuantity(text, unit)).toEqual({ ok: true, value });
  });

  test.each<[string, KeptUnit]>([
    ['5 ng/L', 'ng'],
    ['5 mL', 'ng'],
    ['5 foo', 'ng'],
    ['ng', 'ng'],
    ['5 ppb', 'ng/mL'],
    ['1,234 ng', 'ng']
  ])('%s is refused as %s', (text, unit) => {
    expect(readQuantity(text, unit).ok).toBe(false);
  });

  test('without a digit is named as it was typed', () => {
    expect(readQuantity('abc', 'ng')).toEqual({ ok: false, message: "'abc' is not a number." });
  });

  test('of another kind names the units that would do', () => {
    expect(readQuantity('5 mL', 'ng')).toEqual({
      ok: false,
      message: "'mL' is not a unit of amount here. Use one of ng, µg, mg, g."
    });
  });
});
