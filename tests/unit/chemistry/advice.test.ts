import { describe, expect, test } from 'vitest';
import {
  bestValue,
  sampleFormat,
  solvent,
  solventPairs,
  solvents,
  volatility
} from '../../../src/lib/server/chemistry/index';

describe('volatility', () => {
  const nothing = { vapourPressurePa: null, boilingPointC: null, henryPaM3Mol: null };

  test('goes by the more telling of vapour pressure and boiling point', () => {
    expect(volatility({ ...nothing, vapourPressurePa: 360, boilingPointC: 300 }).level).toBe('high');
    expect(volatility({ ...nothing, vapourPressurePa: 0.001, boilingPointC: 200 }).level).toBe('some');
    expect(volatility({ ...nothing, vapourPressurePa: 0.001 })).toMatchObject({ level: 'low', findings: [] });
  });

  test('asks for the properties where there are none, and says nothing else', () => {
    const { level, findings, reasons } = volatility(nothing);
    expect([level, findings.length, reasons.length]).toEqual(['unknown', 1, 0]);
    expect(findings[0]!.text).toContain('Does anybody know');
  });

  test('a Henry constant speaks of leaving water, not of leaving the extract', () => {
    const { level, leavesWater, findings } = volatility({
      ...nothing,
      boilingPointC: 340,
      henryPaM3Mol: 4.3
    });
    expect([level, leavesWater]).toEqual(['low', true]);
    expect(findings.map(({ standing }) => standing)).toEqual(['practice']);
  });

  test('every finding of a method names the method, and holds the planned volume beside it', () => {
    const { findings } = volatility({ ...nothing, boilingPointC: 115 }, 0.3);
    const seen = findings.filter(({ standing }) => standing === 'seen');
    expect(seen.map(({ source }) => source)).toEqual([
      'SW-846 Method 8270E, Rev. 6 (2018), 1.4.10',
      'EPA Method 521',
      'SW-846 Method 3535A, Rev. 1 (2007), 11.10.2.2',
      'EPA Method 521, 525.2 and 526',
      'EPA Method 526'
    ]);
    expect(seen.filter(({ evidence }) => evidence.includes('Planned here: 0.3 mL'))).toHaveLength(2);
  });
});

describe('solvents', () => {
  test('are found by key and by name', () => {
    expect(solvent('acetone')).toBe(solvent(' Acetone '));
    expect(() => solvent('water glass')).toThrow(/'water glass' is not known. There are: Diethyl ether/);
  });

  test('every value says where it comes from', () => {
    for (const each of solvents) {
      const values = [
        each.boilingPointC,
        each.polarity,
        each.waterInSolvent,
        each.solventInWater,
        each.mixingOrigin
      ];
      const azeotrope = each.waterAzeotrope === 'none' ? null : each.waterAzeotrope;
      for (const value of [...values, azeotrope])
        if (value) expect(value.source).toMatch(/CRC Handbook|from memory, verify/);
    }
  });

  test('those that mix with water have no solubility in it, and an azeotrope boils below its solvent', () => {
    for (const {
      mixesWithWater,
      waterInSolvent,
      solventInWater,
      waterAzeotrope,
      boilingPointC
    } of solvents) {
      if (mixesWithWater) expect([waterInSolvent, solventInWater]).toEqual([null, null]);
      if (waterAzeotrope && waterAzeotrope !== 'none')
        expect(waterAzeotrope.boilingPointC).toBeLessThan(boilingPointC.value);
    }
    for (const { first, second, boilingPointC } of solventPairs) {
      const lower = Math.min(solvent(first).boilingPointC.value, solvent(second).boilingPointC.value);
      expect(boilingPointC).toBeLessThan(lower);
    }
  });
});

describe('the format of a sample', () => {
  test('goes by volume and solids', () => {
    const of = (volumeMl: number, suspendedSolidsMgL: number | null) => {
      const { format, size, preFilter } = sampleFormat({ volumeMl, suspendedSolidsMgL });
      return [format, size, preFilter];
    };
    expect(of(100, 5)).toEqual(['cartridge', '60 to 200 mg in 3 mL', 'no']);
    expect(of(500, 50)).toEqual(['cartridge', '200 to 500 mg in 6 mL', 'no']);
    expect(of(500, 200)).toEqual(['cartridge or disk', '200 to 500 mg in 6 mL, or 90 mm', 'perhaps']);
    expect(of(1000, 10)).toEqual(['cartridge or disk', '0.5 to 1 g in 6 to 20 mL, or 47 mm', 'no']);
    expect(of(1000, 2000)).toEqual(['disk', '90 mm', 'yes']);
    expect(of(3000, null)).toEqual(['disk', '90 mm', 'not known']);
  });

  test('ends at 1 % of solids, where the method does', () => {
    expect(sampleFormat({ volumeMl: 500, suspendedSolidsMgL: 10_000 }).format).not.toBe('neither');
    expect(sampleFormat({ volumeMl: 500, suspendedSolidsMgL: 10_001 })).toMatchObject({
      format: 'neither',
      loadingMinutes: null,
      findings: [{ standing: 'seen' }]
    });
  });

  test('tells how long the load takes: 500 mL at 5 to 20 mL/min, a litre on a disk from ten minutes', () => {
    expect(sampleFormat({ volumeMl: 500, suspendedSolidsMgL: 0 }).loadingMinutes).toEqual({
      low: 25,
      high: 100
    });
    expect(sampleFormat({ volumeMl: 1000, suspendedSolidsMgL: 100 }).loadingMinutes).toEqual({
      low: 10,
      high: 120
    });
  });

  test('asks for solids that nobody measured', () => {
    const { findings } = sampleFormat({ volumeMl: 500, suspendedSolidsMgL: null });
    expect(findings.at(-1)!.evidence).toBe('Suspended solids have not been given.');
  });
});

test('a typed value wins over a predicted one, and the answer says which it is', () => {
  const predicted = { value: 2.1, source: 'a model' };
  expect(bestValue({ value: 3, source: 'a handbook' }, predicted)).toEqual({
    value: 3,
    standing: 'typed',
    source: 'a handbook'
  });
  expect(bestValue({ value: 3, source: null }, predicted)!.source).toBe(
    'typed into the library without a source'
  );
  expect(bestValue(null, predicted)).toEqual({ value: 2.1, standing: 'predicted', source: 'a model' });
  expect(bestValue(null, null)).toBeNull();
  // Zero is a value.
  expect(bestValue({ value: 0, source: null }, predicted)!.value).toBe(0);
});
