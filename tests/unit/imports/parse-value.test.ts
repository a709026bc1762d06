import { describe, expect, it } from 'vitest';
import { parseValue } from '../../../src/lib/server/imports/parse-value';
import type { Cell } from '../../../src/lib/server/imports/types';

const text = (value: string): Cell => ({ kind: 'text', value, raw: value });
const parsed = (value: string, decimal: 'point' | 'comma' | null = null) => parseValue(text(value), decimal);

describe('parseValue', () => {
  it.each(['ND', 'n.d.', 'n. d.', 'Not detected', 'none detected', '<LOD', '< LOD'])(
    'takes %s for not detected',
    (value) => {
      expect(parsed(value)).toEqual({ state: 'not detected' });
    }
  );

  it.each(['', ' ', '-', '–', '—', 'n/a', 'N/A', 'n.a.', 'not measured', '\u00a0'])(
    'takes %j for missing',
    (value) => {
      expect(parsed(value)).toEqual({ state: 'missing' });
    }
  );

  it('takes an empty cell for missing, never for not detected', () => {
    expect(parseValue(null, null)).toEqual({ state: 'missing' });
  });

  it.each([
    ['<0.5', 0.5],
    ['< 0,5', 0.5],
    ['≤2', 2],
    ['<=2', 2]
  ])('reads the limit of %s', (value, limit) => {
    expect(parsed(value)).toEqual({ state: 'below', limit });
  });

  it.each([
    ['>500', 500],
    ['> 1 200', 1200],
    ['>max', null],
    ['above range', null]
  ])('takes %s for above range', (value, limit) => {
    expect(parsed(value)).toEqual({ state: 'above', limit });
  });

  it('keeps a limit open that can be read in two ways', () => {
    expect(parsed('<1,234')).toEqual({ state: 'ambiguous', asPoint: 1234, asComma: 1.234 });
  });

  it.each(['#DIV/0!', '#N/A', '#REF!'])('takes %s as text for a failed formula as well', (value) => {
    expect(parsed(value)).toEqual({ state: 'error', error: value });
    expect(parseValue({ kind: 'error', value, raw: value }, null)).toEqual({ state: 'error', error: value });
  });

  it('suggests what was meant by a slip of the keys', () => {
    expect(parsed('48,2l3')).toMatchObject({ state: 'slip', mended: '48,213' });
  });

  it('tells a number with its unit from a wrong number', () => {
    expect(parsed('48.2 ng/mL')).toEqual({ state: 'unit', number: '48.2', unit: 'ng/mL' });
  });

  it('does not read a number against the mark of its column', () => {
    expect(parsed('48.2', 'comma')).toEqual({ state: 'contradicts' });
  });

  it.each(['<0', '<-1', '>', '<', 'abc', 'TRUE'])('reads no value from %s', (value) => {
    expect(parsed(value)).toEqual({ state: 'unreadable' });
  });

  it('keeps the number under a date and says which date it shows', () => {
    expect(parseValue({ kind: 'date', value: 46085, raw: '2026-03-04' }, null)).toEqual({
      state: 'date',
      serial: 46085,
      iso: '2026-03-04'
    });
  });
});
