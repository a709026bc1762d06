import { describe, expect, it } from 'vitest';
import { figureText, percentText } from '../../../src/lib/domain/figure-text';

describe('figureText', () => {
  it.each([
    [49.31, '49.3'],
    [104.4, '104'],
    [0.031249, '0.0312'],
    [9.999, '10.0'],
    [0, '0'],
    [-3.456, '−3.46'],
    [1234.6, '1230'],
    [48213, '48\u202F200'],
    [0.00001234, '1.23e−5']
  ])('writes %d with three significant digits as %s', (value, text) => {
    expect(figureText(value)).toBe(text);
  });

  it('writes more digits where a figure is opened', () => {
    expect(figureText(152.94321, 6)).toBe('152.943');
  });

  it.each([Number.NaN, Number.POSITIVE_INFINITY])('refuses %d instead of printing it', (value) => {
    expect(() => figureText(value)).toThrow(RangeError);
  });
});

describe('percentText', () => {
  it.each([
    [49.34, '49.3'],
    [99.94, '99.9'],
    [99.96, '100'],
    [103.6, '104'],
    [-0.04, '0.0'],
    [-4.26, '−4.3']
  ])('writes %d as %s', (value, text) => {
    expect(percentText(value)).toBe(text);
  });

  it.each([
    [69.97, '69.97'],
    [69.9996, '69.9996'],
    [130.4, '130.4'],
    [70, '70.0'],
    [129.7, '129.7']
  ])('never lets %d round onto a limit of 70 or 130: %s', (value, text) => {
    expect(percentText(value, [70, 130])).toBe(text);
  });

  it.each([
    [120.45, 120.4, '120.5'],
    [119.6, 119.8, '119.6'],
    [70.23, 70.22, '70.23']
  ])('nor %d past a limit of %d: %s', (value, limit, text) => {
    expect(percentText(value, [limit])).toBe(text);
  });

  it('takes what only rounding parts from its limit as lying on it', () => {
    expect(percentText(70 - 1e-13, [70])).toBe('70.0');
  });
});
