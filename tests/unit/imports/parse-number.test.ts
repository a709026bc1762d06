import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decimalEvidence, provenMark } from '../../../src/lib/server/imports/decimal-evidence';
import { mendNumber, parseNumber } from '../../../src/lib/server/imports/parse-number';

const valueOf = (text: string, decimal: 'point' | 'comma' | null = null) => {
  const number = parseNumber(text, decimal);
  return number.kind === 'number' ? number.value : number.kind;
};

describe('parseNumber', () => {
  it.each([
    ['12', 12],
    ['48.2', 48.2],
    ['48,2', 48.2],
    ['0,125', 0.125],
    ['0.125', 0.125],
    [',5', 0.5],
    ['1234,567', 1234.567],
    ['1.234,5', 1234.5],
    ['1,234.5', 1234.5],
    ['1,234,567', 1234567],
    ['1.234.567', 1234567],
    ['1 234 567', 1234567],
    ['1\u00a0234,5', 1234.5],
    ['1\u2009234.5', 1234.5],
    ['1\u202f234\u202f567,25', 1234567.25],
    ["1'234.5", 1234.5],
    ['1’234’567', 1234567],
    ['\u22123,5', -3.5],
    ['+7', 7],
    ['1.5e3', 1500],
    ['1,234E+05', 123400],
    [' 12,0 ', 12]
  ])('reads %s as %d', (text, value) => {
    expect(valueOf(text)).toBe(value);
  });

  it.each(['1,234', '12.345', '-1,234', '999,000'])('leaves %s open', (text) => {
    expect(parseNumber(text).kind).toBe('ambiguous');
  });

  it('shows both readings of an open number', () => {
    expect(parseNumber('1,234')).toEqual({ kind: 'ambiguous', asPoint: 1234, asComma: 1.234 });
    expect(parseNumber('1.234')).toEqual({ kind: 'ambiguous', asPoint: 1.234, asComma: 1234 });
  });

  it('decides an open number by the mark of its column', () => {
    expect(valueOf('1,234', 'comma')).toBe(1.234);
    expect(valueOf('1,234', 'point')).toBe(1234);
    expect(valueOf('1.234', 'comma')).toBe(1234);
  });

  it('takes no number that contradicts the mark of its column', () => {
    expect(valueOf('48.2', 'comma')).toBe('none');
    expect(valueOf('1,234.5', 'comma')).toBe('none');
  });

  it.each([
    '48,2l3',
    '1 23',
    '12 34,5',
    '1,23,456',
    '1.2.3',
    '1,5 2',
    'e5',
    '',
    '.',
    '1e9999',
    '5 mL',
    '0x10',
    'Infinity',
    'NaN'
  ])('finds no number in %j', (text) => {
    expect(parseNumber(text).kind).toBe('none');
  });

  it('gives back every double from its shortest text, with a point or a comma', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const text = String(value);
        const wanted = Object.is(value, -0) ? 0 : value;
        expect(valueOf(text, 'point')).toBe(wanted);
        expect(valueOf(text.replace('.', ','), 'comma')).toBe(wanted);
      })
    );
  });

  it('reads grouped integers of any size back', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1_000_000, max: 2 ** 52 }),
        fc.constantFrom(' ', '\u202f', "'", ',', '.'),
        (value, mark) => {
          expect(valueOf(String(value).replace(/\B(?=(\d{3})+$)/g, mark))).toBe(value);
        }
      )
    );
  });
});

describe('decimalEvidence', () => {
  it('is given by one number that can be read in one way only', () => {
    expect(provenMark(decimalEvidence(['1,234', '12,5', 'ND']))).toBe('comma');
    expect(provenMark(decimalEvidence(['1,234', '1,234,567']))).toBe('point');
    expect(provenMark(decimalEvidence(['1,234', '<0,5']))).toBe('comma');
  });

  it('is not given by open numbers, nor where both marks occur', () => {
    expect(provenMark(decimalEvidence(['1,234', '5,678', '12']))).toBeNull();
    expect(decimalEvidence(['1,5', '1.5'])).toEqual({ point: '1.5', comma: '1,5' });
    expect(provenMark(decimalEvidence(['1,5', '1.5']))).toBeNull();
  });
});

describe('mendNumber', () => {
  it.each([
    ['48,2l3', '48,213'],
    ['1O5', '105'],
    ['48,,2', '48,2'],
    ['48. 2', '48.2']
  ])('suggests for %s to read %s', (text, mended) => {
    expect(mendNumber(text)?.text).toBe(mended);
  });

  it.each(['lol', 'oil', 'abc', '12x'])('has nothing to suggest for %s', (text) => {
    expect(mendNumber(text)).toBeNull();
  });
});
