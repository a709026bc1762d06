import fc from 'fast-check';
import { expect, test } from 'vitest';
import {
  neutralShareOf,
  readPasses,
  workingRanges,
  type PanelAnalyte
} from '../../../src/lib/server/chemistry/index';
import { groups as anyGroups } from './arbitrary';

const analyte = (
  name: string,
  pkaAcid: readonly number[],
  pkaBase: readonly number[] = [],
  logKow: number | null = 2
): PanelAnalyte => ({
  id: name,
  name,
  logKow,
  pkaAcid,
  pkaBase,
  boilingPointC: null,
  henryPaM3Mol: null
});

test('a panel of acids and bases is read as one pass, and two', () => {
  const panel = [
    analyte('acid', [4.2]),
    analyte('phenol', [9.9]),
    analyte('base', [], [5.2]),
    analyte('neutral', []),
    analyte('zwitterion', [3.7], [10.7]),
    analyte('label', [], [], null)
  ];
  const reading = readPasses(panel, workingRanges.c18);
  // The acid below 2.20, the phenol below 7.90, the base above 7.20.
  expect(reading.one).toEqual({
    ph: 7.5,
    serves: { low: 7.2, high: 7.9 },
    neutral: ['phenol', 'base', 'neutral']
  });
  expect(reading.two).toMatchObject({
    first: { ph: 2, neutral: ['acid', 'phenol', 'neutral'] },
    neutral: ['acid', 'phenol', 'base', 'neutral']
  });
  expect(reading).toMatchObject({ judged: 5, never: ['zwitterion'], unknown: ['label'] });
  expect(reading.sentences).toEqual([
    'One pass at pH 7.5 has 3 of 5 at least 99 % neutral.',
    'Two passes, at pH 2 and 8.2, have 4. Would the second be worth it?',
    '1 reaches that at no pH from 2 to 9. Would an ion exchanger hold it, or a sorbent that stands more?',
    'Of 1 the charge is not known; they are not counted.'
  ]);
});

test('a neutral panel is left at the pH it comes with', () => {
  const { one, two, sentences } = readPasses([analyte('a', []), analyte('b', [])], workingRanges.c18);
  expect(one).toEqual({ ph: 7, serves: { low: 2, high: 9 }, neutral: ['a', 'b'] });
  expect(two).toBeNull();
  expect(sentences).toEqual(['One pass at pH 7 has 2 of 2 at least 99 % neutral.']);
});

test('where nothing can be neutral, or nothing is known, it says so', () => {
  const zwitterions = readPasses([analyte('a', [3.7], [10.7])], workingRanges.c18);
  expect(zwitterions.one).toBeNull();
  expect(zwitterions.sentences).toEqual(['At no pH from 2 to 9 is any of the 1 at least 99 % neutral.']);
  expect(readPasses([], workingRanges.c18).sentences).toEqual([
    'Of no analyte of this panel is the charge known.'
  ]);
});

test('a pH is moved no further from 7 than a unit of room asks for', () => {
  // Neutral below 9.9 − log10 99 = 7.904: at 6.9 a unit is left.
  expect(readPasses([analyte('phenol', [9.9])], workingRanges.c18).one!.ph).toBe(6.9);
});

test('a second pass that gains nothing is not offered', () => {
  const { two, sentences } = readPasses([analyte('a', []), analyte('b', [3.7], [10.7])], workingRanges.c18);
  expect(two).toBeNull();
  expect(sentences).toContain('A second pass at another pH gains none.');
});

test('the share at a pH is null where the charge is not known', () => {
  expect(neutralShareOf(analyte('a', [4]), 4)).toBe(0.5);
  expect(neutralShareOf(analyte('b', [], [], null), 4)).toBeNull();
});

test('any pass holds what is neutral at its pH, one holds as many as the best of the scan, two no fewer than one', () => {
  fc.assert(
    fc.property(fc.array(anyGroups, { minLength: 1, maxLength: 8 }), (given) => {
      const panel = given.map(({ acids, bases }, i) => analyte(`${i}`, acids, bases));
      const { one, two, never } = readPasses(panel, workingRanges.c18);
      const at = (ph: number) =>
        panel.filter((each) => neutralShareOf(each, ph)! >= 0.99).map(({ name }) => name);
      const counts = Array.from({ length: 71 }, (_, i) => at((20 + i) / 10).length);
      expect(one?.neutral.length ?? 0).toBe(Math.max(...counts));
      if (one) expect(one.neutral).toEqual(at(one.ph));
      if (two) {
        expect(two.neutral.length).toBeGreaterThan(one!.neutral.length);
        expect(two.neutral).toEqual(
          panel
            .map(({ name }) => name)
            .filter((name) => at(two.first.ph).includes(name) || at(two.second.ph).includes(name))
        );
      }
      for (const name of never) expect(two?.neutral ?? one?.neutral ?? []).not.toContain(name);
    }),
    { numRuns: 50 }
  );
});
