import { describe, expect, it } from 'vitest';
import {
  chargeMark,
  logDText,
  neutralRowSentence,
  neutralText,
  rangesText
} from '../../../src/lib/charts/neutral-text';
import type { PanelChemistryRow } from '../../../src/lib/views/panel-chemistry';

describe('neutralText', () => {
  it.each([
    [1, '100'],
    [0, '0'],
    [0.9999999, '>\u200999.9'],
    [0.9995, '>\u200999.9'],
    [0.9948, '99.5'],
    [0.5, '50.0'],
    [0.0123, '1.2'],
    [1e-7, '<\u20090.1']
  ])('writes a share of %s as %s', (share, text) => {
    expect(neutralText(share)).toBe(text);
  });

  it('never rounds a share across the 99 % that the groups part at', () => {
    expect(neutralText(0.98997)).toBe('98.997');
    expect(neutralText(0.0099)).toBe('0.99');
  });
});

describe('rangesText', () => {
  it('rounds inwards, so that a range never promises more than was computed', () => {
    // An acid of pKa 4.91 is 99 % neutral up to 4.91 - log10(99) = 2.914, a base of 9.45 from 11.446 on.
    expect(rangesText([{ low: 0, high: 4.91 - Math.log10(99) }])).toBe('below 2.9');
    expect(rangesText([{ low: 9.45 + Math.log10(99), high: 14 }])).toBe('above 11.5');
    expect(rangesText([{ low: 3.61, high: 3.79 }])).toBe('3.7 to 3.7');
  });

  it('names the whole axis, several ranges, and none', () => {
    expect(rangesText([{ low: 0, high: 14 }])).toBe('at any pH');
    expect(
      rangesText([
        { low: 0, high: 2 },
        { low: 11, high: 14 }
      ])
    ).toBe('below 2, above 11');
    expect(rangesText([])).toBeNull();
  });

  it('says of a range within a tenth where it lies, not that it ends before it begins', () => {
    expect(rangesText([{ low: 3.62, high: 3.68 }])).toBe('about 3.65');
  });
});

it('writes log D with one decimal and a real minus', () => {
  expect([-3.04, -0.02, 2, 0.96].map(logDText)).toEqual(['\u22123.0', '0.0', '2.0', '1.0']);
  expect([chargeMark('positive'), chargeMark('negative'), chargeMark('both'), chargeMark('none')]).toEqual([
    '(+)',
    '(\u2212)',
    '(±)',
    ''
  ]);
});

describe('neutralRowSentence', () => {
  const row: PanelChemistryRow = {
    panelEntryId: 'entry',
    analyteId: 'analyte',
    name: 'Ibuprofen',
    role: 'target',
    class: 'acid',
    also: [],
    evidence: 'acid pKa 4.91',
    pkaAcid: [4.91],
    pkaBase: [],
    logKow: { value: 3.97, basis: 'library', source: 'a handbook' },
    neutral: 0.0081,
    charge: 'negative',
    logD: 1.88,
    curve: null,
    neutralRanges: [{ low: 0, high: 2.914 }],
    chargedRanges: [{ low: 6.91, high: 14 }],
    unknown: null,
    href: '?analyte=entry'
  };

  it('reads a row aloud', () => {
    expect(neutralRowSentence(row, 7)).toBe(
      'Ibuprofen: 0.8 % neutral at pH 7, mostly negative; log D 1.9; at least 99 % neutral below pH 2.9'
    );
  });

  it('says why nothing can be said', () => {
    const unknown = { ...row, neutral: null, charge: null, logD: null, unknown: 'no pKa in the library' };
    expect(neutralRowSentence(unknown, 7)).toBe('Ibuprofen: no pKa in the library');
  });
});
