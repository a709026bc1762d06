import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  chemistryGroups,
  workingRanges,
  type ChemistryGroup,
  type PanelAnalyte
} from '../../../src/lib/server/chemistry/index';
import { groups as anyGroups } from './arbitrary';

const analyte = (name: string, properties: Partial<PanelAnalyte> = {}): PanelAnalyte => ({
  id: name,
  name,
  logKow: 2,
  pkaAcid: [],
  pkaBase: [],
  boilingPointC: null,
  henryPaM3Mol: null,
  ...properties
});

const placed = (groups: readonly ChemistryGroup[]) =>
  Object.fromEntries(groups.map(({ key, names }) => [key, names]));
const evidenceOf = (given: PanelAnalyte, options = {}) =>
  chemistryGroups([given], options)[0]!.members[0]!.evidence;

test('each analyte stands in one group of charge, and one never looked up in none', () => {
  const groups = chemistryGroups([
    analyte('Acid', { pkaAcid: [4.2] }),
    analyte('Base', { pkaBase: [5.2] }),
    analyte('Ampholyte', { pkaAcid: [8.4], pkaBase: [1.6] }),
    analyte('Zwitterion', { pkaAcid: [3.7], pkaBase: [10.7] }),
    analyte('Onium', { permanentCharge: 1 }),
    analyte('Guanidine', { pkaBase: [12.4] }),
    analyte('Amide', { pkaAcid: [13.9] }),
    analyte('Oil', { logKow: 6 }),
    analyte('Sugar', { logKow: -3 }),
    analyte('Vapour', { boilingPointC: 80 }),
    analyte('Gas', { henryPaM3Mol: 500 }),
    analyte('Label', { logKow: null })
  ]);
  expect(placed(groups)).toEqual({
    neutral: ['Amide', 'Oil', 'Sugar', 'Vapour', 'Gas'],
    acid: ['Acid'],
    base: ['Base'],
    both: ['Ampholyte', 'Zwitterion'],
    charged: ['Onium', 'Guanidine'],
    hydrophilic: ['Sugar'],
    hydrophobic: ['Oil'],
    volatile: ['Vapour', 'Gas'],
    unknown: ['Label']
  });
  expect(chemistryGroups([])).toEqual([]);
});

describe('the evidence of a member', () => {
  test('names the pH, rounded to the side on which the promise holds', () => {
    // 4.2 − log10 99 = 2.2044; 5.2 + log10 99 = 7.1956.
    expect(evidenceOf(analyte('a', { pkaAcid: [4.2] }))).toBe('acid pKa 4.2; 99 % neutral below pH 2.20');
    expect(evidenceOf(analyte('b', { pkaBase: [5.2] }))).toBe('base pKa 5.2; 99 % neutral above pH 7.20');
    expect(evidenceOf(analyte('c', { pkaAcid: [9], pkaBase: [3] }))).toBe(
      'acid pKa 9, base pKa 3; 99 % neutral from pH 5.00 to 7.00'
    );
  });

  test('says how far it gets where it reaches the share nowhere, and never rounds up to it', () => {
    expect(evidenceOf(analyte('a', { pkaAcid: [5.7], pkaBase: [1.7] }))).toBe(
      'acid pKa 5.7, base pKa 1.7; 98 % neutral at the most, at pH 3.7'
    );
    // 98.97 % at pH 2.
    expect(evidenceOf(analyte('b', { pkaAcid: [3.983] }))).toContain('98.9 % neutral at the most, at pH 2');
    expect(evidenceOf(analyte('c', { pkaAcid: [3.7], pkaBase: [10.7] }))).toContain(
      'less than 0.1 % neutral'
    );
  });

  test('says that a missing pKa was taken for none, and that log Kow was predicted', () => {
    expect(evidenceOf(analyte('a'))).toBe('no pKa on file, taken to have no group');
    const [, hydrophobic] = chemistryGroups([analyte('b', { logKow: 6, logKowIsPredicted: true })]);
    expect(hydrophobic!.members[0]!.evidence).toBe('log Kow 6, predicted');
  });
});

describe('what the structure shows and the library lacks', () => {
  const carboxylic = { name: 'carboxylic acid', kind: 'acid', sureness: 'certain' } as const;
  const ringNitrogen = { name: 'nitrogen in an aromatic ring', kind: 'base', sureness: 'possible' } as const;

  test('an acid without its pKa is not taken for neutral', () => {
    expect(placed(chemistryGroups([analyte('a', { ionisable: [carboxylic] })]))).toEqual({ unknown: ['a'] });
    expect(evidenceOf(analyte('a', { ionisable: [carboxylic], pkaBase: [9] }))).toBe(
      'the structure shows carboxylic acid, and no pKa of it is on file'
    );
    expect(placed(chemistryGroups([analyte('a', { ionisable: [carboxylic], pkaAcid: [4] })]))).toEqual({
      acid: ['a']
    });
  });

  test('a group that may be one is told and does not decide', () => {
    expect(evidenceOf(analyte('a', { ionisable: [ringNitrogen] }))).toBe(
      'no pKa on file, taken to have no group; the structure shows nitrogen in an aromatic ring without a pKa'
    );
    expect(placed(chemistryGroups([analyte('a', { ionisable: [ringNitrogen] })]))).toEqual({
      neutral: ['a']
    });
  });

  test('a permanent charge stays one', () => {
    const betaine = analyte('a', { permanentCharge: 1, ionisable: [carboxylic], logKow: null });
    expect(placed(chemistryGroups([betaine]))).toEqual({ charged: ['a'] });
    expect(evidenceOf(betaine)).toBe('permanent charge +1');
  });
});

test('a wider working range makes acids neutral that silica does not stand', () => {
  const strong = analyte('a', { pkaAcid: [3.1] });
  expect(evidenceOf(strong)).toContain('at the most, at pH 2');
  expect(evidenceOf(strong, { range: workingRanges.polymer })).toBe(
    'acid pKa 3.1; 99 % neutral below pH 1.10'
  );
});

test('an impossible value takes nothing down but its own analyte', () => {
  const groups = chemistryGroups([analyte('a', { pkaAcid: [500] }), analyte('b', { pkaAcid: [4.2] })]);
  expect(placed(groups)).toEqual({ acid: ['b'], unknown: ['a'] });
  expect(groups.at(-1)!.members[0]!.evidence).toContain('must lie between -20 and 50, found 500');
  expect(placed(chemistryGroups([analyte('c', { boilingPointC: 1e9 })]))).toEqual({ neutral: ['c'] });
});

test('every group carries its source, and the rules of the trade say that they have none', () => {
  for (const { source, standing } of chemistryGroups([
    analyte('a', { pkaAcid: [4] }),
    analyte('b', { logKow: 9 })
  ])) {
    expect(standing).toBe('practice');
    expect(source).toBe('common practice, no source');
  }
});

test('the volatile are asked what the most volatile one is, each question once', () => {
  const [, volatile] = chemistryGroups(
    [analyte('a', { boilingPointC: 210 }), analyte('b', { boilingPointC: 80, henryPaM3Mol: 5 })],
    { finalVolumeMl: 0.4 }
  );
  expect(volatile!.names).toEqual(['a', 'b']);
  const texts = volatile!.findings.map(({ text }) => text);
  expect(new Set(texts).size).toBe(texts.length);
  expect(volatile!.findings.map(({ source }) => source).join()).toContain('8270E');
  expect(volatile!.findings.map(({ evidence }) => evidence).join()).toContain('Planned here: 0.4 mL');
});

test('what leaves water but boils high is not called volatile', () => {
  const heavy = analyte('a', { boilingPointC: 340, henryPaM3Mol: 4.3 });
  expect(placed(chemistryGroups([heavy]))).toEqual({ neutral: ['a'] });
});

test('any panel is placed whole: one group of charge for each', () => {
  fc.assert(
    fc.property(fc.array(anyGroups, { maxLength: 8 }), (panel) => {
      const analytes = panel.map(({ acids, bases }, i) =>
        analyte(`${i}`, { pkaAcid: acids, pkaBase: bases })
      );
      const byCharge = chemistryGroups(analytes).filter(({ key }) =>
        ['neutral', 'acid', 'base', 'both', 'charged', 'unknown'].includes(key)
      );
      const names = byCharge.flatMap((group) => group.names).sort();
      expect(names).toEqual(analytes.map(({ name }) => name).sort());
    })
  );
});
