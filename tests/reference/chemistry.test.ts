import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import * as chemistry from '../../src/lib/server/chemistry/index';
import { verify, type Check } from './check';
import recorded from './r/chemistry.json';

describe('breakthrough', () => {
  // V/V_R at a loss, for tanks in series; computed with scipy's gammainc and brentq, printed to three decimals.
  const table: Readonly<Record<number, readonly number[]>> = {
    5: [0.323, 0.388, 0.47, 0.621, 0.792],
    10: [0.51, 0.573, 0.651, 0.789, 0.938],
    20: [0.663, 0.718, 0.785, 0.9, 1.025],
    50: [0.805, 0.848, 0.898, 0.986, 1.083],
    100: [0.876, 0.909, 0.949, 1.02, 1.101]
  };
  const losses = [0.005, 0.01, 0.02, 0.05, 0.1];
  verify(
    Object.entries(table).flatMap(([plates, ratios]) =>
      ratios.map((expected, i): Check => ({
        what: `volume ratio at a loss of ${100 * losses[i]!} % and ${plates} plates`,
        source: 'plate model, by scipy 1.17',
        actual: () => chemistry.breakthroughVolumeRatio(Number(plates), losses[i]),
        expected,
        absolute: 0.0005
      }))
    )
  );

  // Lövkvist and Jönsson, Anal. Chem. 59 (1987) 818: V_B/V_R at 5 %; coefficients from memory, values worked out from them.
  verify(
    (
      [
        [5, 0.681],
        [10, 0.821],
        [20, 0.92],
        [50, 0.994],
        [100, 1.022]
      ] as const
    ).map(([plates, expected]) => ({
      what: `the fitted volume ratio at 5 % and ${plates} plates`,
      source: 'Lövkvist and Jönsson 1987, coefficients from memory',
      actual: () => chemistry.lovkvistJonssonRatio(plates),
      expected,
      absolute: 0.0005
    }))
  );

  it('lies near the fit of Lövkvist and Jönsson, who let the sample disperse in another way', () => {
    for (const plates of [10, 20, 50, 100]) {
      const own = chemistry.breakthroughVolumeRatio(plates, 0.05);
      expect(Math.abs(own / chemistry.lovkvistJonssonRatio(plates) - 1)).toBeLessThan(0.05);
    }
  });

  // Two standard deviations before V_R; 1 − 2/√N worked by hand.
  verify([
    {
      what: 'the volume ratio at 2.3 % of the inlet concentration and 16 plates',
      source: 'Werkhoven-Goewie 1981, from memory: 1 − 2/4',
      actual: () => chemistry.werkhovenGoewieRatio(16),
      expected: 0.5,
      absolute: 1e-15
    }
  ]);

  it('loses of one plate 1 − (1 − e^(−x))/x, the mean of a stirred tank (textbook)', () => {
    for (const ratio of [0.01, 0.3, 1, 5]) {
      expect(chemistry.breakthroughLoss(1, ratio)).toBeCloseTo(1 + Math.expm1(-ratio) / ratio, 12);
    }
  });
});

describe('neutral share', () => {
  verify([
    {
      what: 'log10 of the neutral share of gabapentin at pH 7 (pKa 3.68 and 10.70)',
      source: 'independent groups: about 1e-7, −3.3202 − 3.7001',
      actual: () => Math.log10(chemistry.fractionNeutral({ acids: [3.68], bases: [10.7] }, 7)),
      expected: -7.0203,
      absolute: 1e-4
    },
    {
      what: 'percent of ibuprofen neutral at pH 4.5 with the lowest pKa seen, 4.4',
      source: 'published pKa values spread from 4.4 to 5.2',
      actual: () => 100 * chemistry.fractionNeutral({ acids: [4.4], bases: [] }, 4.5),
      expected: 44,
      absolute: 0.5
    },
    {
      what: 'percent of ibuprofen neutral at pH 4.5 with the highest pKa seen, 5.2',
      source: 'published pKa values spread from 4.4 to 5.2',
      actual: () => 100 * chemistry.fractionNeutral({ acids: [5.2], bases: [] }, 4.5),
      expected: 83,
      absolute: 0.5
    },
    {
      what: 'percent of an acid neutral two units below its pKa',
      source: 'Henderson and Hasselbalch: 100/1.01',
      actual: () => 100 * chemistry.fractionNeutral({ acids: [4.2], bases: [] }, 2.2),
      expected: 99.00990099009901,
      relative: 1e-12
    },
    {
      what: 'percent of a base neutral three units above its pKa',
      source: 'Henderson and Hasselbalch: 100/1.001',
      actual: () => 100 * chemistry.fractionNeutral({ acids: [], bases: [9.5] }, 12.5),
      expected: 99.9000999000999,
      relative: 1e-12
    },
    {
      what: 'the pH below which 99 % of an acid of pKa 4.2 is neutral',
      source: 'pKa − log10 99, by hand',
      actual: () => chemistry.phWindows({ acids: [4.2], bases: [] }, 'neutral')[0]!.high,
      expected: 4.2 - Math.log10(99),
      absolute: 1e-12
    },
    {
      what: 'log D of an acid of log Kow 3.97 and pKa 4.91 at pH 7.91',
      source: 'by hand: 3.97 − log10 1001',
      actual: () => chemistry.logD(3.97, { acids: [4.91], bases: [] }, 7.91).logD,
      expected: 3.97 - Math.log10(1001),
      absolute: 1e-12
    }
  ]);
});

describe('solvents and drying', () => {
  // CRC Handbook of Chemistry and Physics, as held by the chemicals data package 1.5.2.
  const boiling: Readonly<Record<string, number>> = {
    'diethyl-ether': 34.4,
    dichloromethane: 39.8,
    mtbe: 55.1,
    acetone: 56.1,
    chloroform: 61.2,
    methanol: 64.5,
    tetrahydrofuran: 66.0,
    hexane: 68.7,
    'ethyl-acetate': 77.1,
    cyclohexane: 80.7,
    acetonitrile: 81.6,
    isopropanol: 82.2,
    isooctane: 99.2,
    toluene: 110.6
  };
  verify(
    Object.entries(boiling).map(([key, expected]) => ({
      what: `boiling point of ${key}`,
      source: 'CRC Handbook through the chemicals package 1.5.2',
      actual: () => chemistry.solvent(key).boilingPointC.value,
      expected,
      absolute: 0
    }))
  );
  it('holds no solvent beyond those', () => {
    expect(chemistry.solvents.map(({ key }) => key).sort()).toEqual(Object.keys(boiling).sort());
  });
  // 10 H2O per Na2SO4: 180.15/142.04 g/g; quoted as "up to 1.27 g per g" (from memory).
  verify([
    {
      what: 'water bound by 10 g of sodium sulfate',
      source: 'decahydrate, quoted as 1.27 g/g, from memory',
      actual: () => chemistry.boundWaterG(10),
      expected: 12.7,
      absolute: 0.05
    }
  ]);
});

describe('volatility, against what methods name', () => {
  const level = (boilingPointC: number | null, mmHg: number | null) =>
    chemistry.volatility({
      boilingPointC,
      vapourPressurePa: mmHg === null ? null : mmHg * 133.322368,
      henryPaM3Mol: null
    }).level;

  it('ranks what 8270E 1.4.10 names as high (boiling points: pyridine MPBPVP set, others from memory)', () => {
    expect(level(115.2, 20.8)).toBe('high'); // pyridine
    expect([173, 174.1, 180.2, 101.3].map((boils) => level(boils, null))).toEqual(Array(4).fill('high'));
  });
  it('ranks the cresols of 3535A 11.10.2.2 as some (boiling points from memory)', () => {
    expect([191, 201.9, 202.2].map((boils) => level(boils, null))).toEqual(Array(3).fill('some'));
  });
  // Vapour pressures and boiling points of the MPBPVP set.
  it('ranks naphthalene and phenol as some, phenanthrene and benzo[a]pyrene as low', () => {
    expect([level(217.9, 0.085), level(181.8, 0.35)]).toEqual(['some', 'some']);
    expect([level(340, 0.000121), level(495, 5.49e-9)]).toEqual(['low', 'low']);
  });
});

describe('figures that R computes in another way (values recorded from R 4.2.2 by r/chemistry.R)', () => {
  const substances: Readonly<Record<string, chemistry.ChargeGroups>> = {
    gabapentin: { acids: [3.68], bases: [10.7] },
    glyphosate: { acids: [0.8, 2.3, 6], bases: [10.2] },
    benzidine: { acids: [], bases: [4.66, 3.57] },
    bisphenol: { acids: [9.6, 10.2], bases: [] },
    betaine: { acids: [1.8], bases: [], permanentCharge: 1 },
    many: { acids: [2, 4, 6.5, 9], bases: [1, 5, 8.5, 11] }
  };

  /** The program's figure of a recorded name. */
  function figure(name: string): number {
    const [, plates = '', kind = ''] = /^(?:loss|ratio) N (\S+) (?:ratio|loss) (\S+)$/.exec(name) ?? [];
    if (name.startsWith('loss ')) return chemistry.breakthroughLoss(Number(plates), Number(kind));
    if (name.startsWith('ratio ')) return chemistry.breakthroughVolumeRatio(Number(plates), Number(kind));
    const [, who = '', ph = '', what = ''] = /^(\S+) pH (\S+) (.+)$/.exec(name) ?? [];
    const groups = substances[who];
    if (groups) return charge(groups, Number(ph), what);
    const [, place = '', share = '', end] = /^(.+), share ([\d.]+?)(?:\.([12]))?$/.exec(name) ?? [];
    return edge(place, Number(share), end);
  }

  function charge(groups: chemistry.ChargeGroups, ph: number, what: string): number {
    if (what === 'mean') return chemistry.meanCharge(groups, ph);
    if (what === 'neutral') return chemistry.fractionNeutral(groups, ph);
    if (what.startsWith('state ')) {
      const state = chemistry.chargeStates(groups, ph).find(({ netCharge }) => `state ${netCharge}` === what);
      return state!.fraction;
    }
    return chemistry.chargeShares(groups, ph)[what as keyof chemistry.ChargeShares];
  }

  function edge(place: string, share: number, end: string | undefined): number {
    const windows = {
      'diacid neutral below': () =>
        chemistry.phWindows({ acids: [9.6, 10.2], bases: [] }, 'neutral', share)[0]!.high,
      'dibase neutral above': () =>
        chemistry.phWindows({ acids: [], bases: [4.66, 3.57] }, 'neutral', share)[0]!.low,
      'ampholyte neutral': () => {
        const [window] = chemistry.phWindows({ acids: [9], bases: [3] }, 'neutral', share);
        return end === '1' ? window!.low : window!.high;
      },
      'ampholyte charged': () => {
        const [below, above] = chemistry.phWindows({ acids: [9], bases: [3] }, 'charged', share);
        return end === '1' ? below!.high : above!.low;
      }
    };
    return windows[place as keyof typeof windows]();
  }

  // Quadrature and root finding on R's side are good to about 1e-12 of the value; charges are sums of products of doubles.
  it.each(Object.keys(recorded) as (keyof typeof recorded)[])('%s', (name) => {
    const expected = recorded[name];
    const actual = figure(name);
    expect(Math.abs(actual - expected), `${actual} against ${expected}`).toBeLessThanOrEqual(
      1e-10 * Math.abs(expected) + 1e-15
    );
  });

  const hasR = spawnSync('Rscript', ['--version']).status === 0;
  it.skipIf(!hasR)('R gives the recorded values when run now (skipped without R)', () => {
    const script = fileURLToPath(new URL('./r/chemistry.R', import.meta.url));
    const run = spawnSync('Rscript', ['--vanilla', script], { encoding: 'utf8' });
    expect(run.status, run.stderr).toBe(0);
    const live = JSON.parse(run.stdout) as Record<string, number>;
    expect(Object.keys(live).sort()).toEqual(Object.keys(recorded).sort());
    const strays = Object.entries(recorded).filter(
      ([name, value]) => Math.abs(live[name]! - value) > 1e-9 * Math.abs(value) + 1e-12
    );
    expect(strays).toEqual([]);
  });
});
