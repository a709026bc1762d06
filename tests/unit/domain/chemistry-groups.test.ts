import { expect, test } from 'vitest';
import {
  chargeAt,
  chemistryGroups,
  ionisedAcid,
  ionisedBase
} from '../../../src/lib/domain/chemistry-groups';

const analyte = (name: string, properties: object = {}) => ({
  id: name,
  name,
  logKow: 2,
  pkaAcid: [],
  pkaBase: [],
  boilingPointC: null,
  henryPaM3Mol: null,
  ...properties
});

// Henderson and Hasselbalch, pH = pKa + log([A-]/[HA]): half ionised at the pKa, 10 : 1 one unit away.
test('an acid and a base are half ionised at their pKa, and 10 to 1 a unit away', () => {
  expect(ionisedAcid(4.2, 4.2)).toBe(0.5);
  expect(ionisedAcid(4.2, 5.2)).toBeCloseTo(10 / 11, 12);
  expect(ionisedBase(9.2, 9.2)).toBe(0.5);
  expect(ionisedBase(9.2, 10.2)).toBeCloseTo(1 / 11, 12);
});

test('the charge follows the pH', () => {
  const acid = { pkaAcid: [4.9], pkaBase: [] };
  expect([2, 4.9, 7].map((ph) => chargeAt(acid, ph))).toEqual(['neutral', 'anion', 'anion']);
  const base = { pkaAcid: [], pkaBase: [9.6] };
  expect([7, 12].map((ph) => chargeAt(base, ph))).toEqual(['cation', 'neutral']);
  expect(chargeAt({ pkaAcid: [3.7], pkaBase: [10.7] }, 7)).toBe('both');
});

test('each analyte stands in one group of charge, and one never looked up in none', () => {
  const groups = chemistryGroups([
    analyte('Acid', { pkaAcid: [4] }),
    analyte('Base', { pkaBase: [9] }),
    analyte('Oil', { logKow: 6 }),
    analyte('Sugar', { logKow: -3 }),
    analyte('Vapour', { boilingPointC: 80 }),
    analyte('Gas', { henryPaM3Mol: 500 }),
    analyte('Label', { logKow: null })
  ]);
  expect(Object.fromEntries(groups.map(({ key, names }) => [key, names]))).toEqual({
    cation: ['Base'],
    anion: ['Acid'],
    neutral: ['Oil', 'Sugar', 'Vapour', 'Gas'],
    hydrophilic: ['Sugar'],
    hydrophobic: ['Oil'],
    volatile: ['Vapour', 'Gas'],
    unknown: ['Label']
  });
  expect(chemistryGroups([])).toEqual([]);
});
