import { describe, expect, it } from 'vitest';
import * as stats from '../../src/lib/server/stats/index';
import { verify, type Check } from './check';
import { fluorine, fluorineRecoveries, method525, quinoneStudies, twoBeds } from './data/epa';

describe('describe and methodDetectionLimit, 6PPD-quinone', () => {
  const source = 'EPA Research Summary, draft SPE method for 6PPD-quinone, Nov 2023, Table 5-2';
  verify(
    quinoneStudies.flatMap(({ values, published, fromTheData }, i): Check[] => {
      const d = stats.describe(values);
      const mdl = stats.methodDetectionLimit({ spiked: values }).mdl;
      return [
        {
          what: `mean of study ${i + 1}`,
          source,
          actual: () => d.mean,
          expected: published.mean,
          absolute: 0.016
        },
        { what: `SD of study ${i + 1}`, source, actual: () => d.sd, expected: published.sd, absolute: 0.003 },
        {
          what: `MDL of study ${i + 1}`,
          source,
          actual: () => mdl,
          expected: published.mdl,
          absolute: 0.009
        },
        {
          what: `SD of study ${i + 1} as printed`,
          source: 'recomputed by scipy from the printed data',
          actual: () => d.sd,
          expected: fromTheData.sd,
          absolute: 5e-7
        },
        {
          what: `MDL of study ${i + 1} as printed`,
          source: 'recomputed by scipy from the printed data',
          actual: () => mdl,
          expected: fromTheData.mdl,
          absolute: 5e-5
        }
      ];
    })
  );
});

describe('methodDetectionLimit, adsorbable organic fluorine', () => {
  const source = 'EPA AOF single-laboratory validation report, April 2022, Table 5-1';
  const at5 = stats.methodDetectionLimit({ spiked: fluorine.spikedAt5, blanks: fluorine.blanks });
  const at8 = stats.methodDetectionLimit({ spiked: fluorine.spikedAt8, blanks: fluorine.blanks });
  verify([
    { what: 'MDL from blanks', source, actual: () => at5.fromBlanks, expected: 1.94, absolute: 0.005 },
    {
      what: 'MDL from blanks, more digits',
      source: 'scipy',
      actual: () => at5.fromBlanks,
      expected: 1.94485,
      absolute: 5e-6
    },
    {
      what: 'MDL from spikes at 4.95',
      source,
      actual: () => at5.fromSpiked,
      expected: 2.44,
      absolute: 0.005
    },
    {
      what: 'MDL from spikes at 8.04',
      source,
      actual: () => at8.fromSpiked,
      expected: 2.64,
      absolute: 0.005
    },
    { what: 'MDL', source, actual: () => at8.mdl, expected: 2.64, absolute: 0.005 },
    {
      what: 'mean of the blanks',
      source,
      actual: () => stats.describe(fluorine.blanks).mean,
      expected: 0.46,
      absolute: 0.005
    },
    {
      what: 'SD of the blanks',
      source,
      actual: () => stats.describe(fluorine.blanks).sd,
      expected: 0.473,
      absolute: 0.001
    }
  ]);
});

describe('describe and oneSampleT, recoveries of adsorbable organic fluorine', () => {
  const source = 'EPA AOF single-laboratory validation report, April 2022, Table 6-1';
  verify(
    fluorineRecoveries.flatMap(({ name, values, mean, rsd }): Check[] => {
      const d = stats.describe(values);
      return [
        { what: `mean of ${name}`, source, actual: () => d.mean, expected: mean, absolute: 0.0501 },
        { what: `RSD of ${name}`, source, actual: () => d.rsd, expected: rsd, absolute: 0.0501 }
      ];
    })
  );
  const own = 'same data, computed by scipy';
  const [mixed, hexane, fipronil] = fluorineRecoveries.map(({ values }) => stats.oneSampleT(values, 100));
  verify([
    {
      what: '|t| of mixed against 100',
      source: own,
      actual: () => Math.abs(mixed!.t!),
      expected: 4.373,
      absolute: 5e-4
    },
    {
      what: '|t| of PFHxS against 100',
      source: own,
      actual: () => Math.abs(hexane!.t!),
      expected: 0.1002,
      absolute: 5e-5
    },
    {
      what: 't of fipronil against 100',
      source: own,
      actual: () => fipronil!.t,
      expected: 1.579,
      absolute: 5e-4
    },
    {
      what: 'lower bound of mixed',
      source: own,
      actual: () => stats.describe(fluorineRecoveries[0].values).ci!.lower,
      expected: 63.5,
      absolute: 0.005
    },
    {
      what: 'upper bound of mixed',
      source: own,
      actual: () => stats.describe(fluorineRecoveries[0].values).ci!.upper,
      expected: 94.25,
      absolute: 0.005
    }
  ]);
});

describe('massBalance and recovery, two beds in series', () => {
  const source = 'EPA AOF single-laboratory validation report, April 2022, Appendix F';
  verify(
    twoBeds.flatMap(({ id, spike, beds, blanks, breakthrough, recovery }): Check[] => {
      const percent = (mass: number) => (100 * mass) / spike;
      const balance = stats.massBalance({
        replicates: [{ top: percent(beds[0]), bottom: percent(beds[1]) }],
        native: [{ top: percent(blanks[0]), bottom: percent(blanks[1]) }],
        fractions: [
          { name: 'top', countsAs: 'method' },
          { name: 'bottom', countsAs: 'method' }
        ]
      });
      const bottom = balance.fractions[1]!;
      return [
        {
          what: `recovery of ${id}`,
          source,
          actual: () => balance.method!.mean,
          expected: recovery,
          absolute: 0.06
        },
        {
          what: `breakthrough of ${id}`,
          source,
          actual: () => 100 * bottom.share!,
          expected: breakthrough,
          absolute: 0.0501
        },
        {
          what: `recovery of ${id} from amounts`,
          source,
          actual: () =>
            stats.recovery({ found: beds[0] + beds[1], spiked: spike, native: blanks[0] + blanks[1] }),
          expected: recovery,
          absolute: 0.06
        }
      ];
    })
  );
});

describe('fractions on silica gel', () => {
  // Percent recovery by fraction and the totals printed beside them.
  const source = 'EPA SW-846 Methods 3620C and 3630C, fraction tables';
  const total = (...parts: number[]) =>
    stats.massBalance({
      replicates: [Object.fromEntries(parts.map((part, i) => [`F${i + 1}`, part]))],
      fractions: parts.map((_, i) => ({ name: `F${i + 1}`, countsAs: 'method' as const }))
    }).method!.mean;
  verify([
    {
      what: 'total of chlordane at the lower level',
      source,
      actual: () => total(14, 19, 29),
      expected: 62,
      absolute: 1e-12
    },
    {
      what: 'total of chlordane at the higher level',
      source,
      actual: () => total(22, 39, 37),
      expected: 98,
      absolute: 1e-12
    },
    { what: 'total of DDT', source, actual: () => total(86, 15), expected: 101, absolute: 1e-12 },
    // Printed as 82: the method rounds the total.
    {
      what: 'total of DDT on the cartridge',
      source,
      actual: () => total(73, 8.7),
      expected: 82,
      absolute: 0.5
    },
    { what: 'total of toxaphene', source, actual: () => total(15, 73), expected: 88, absolute: 1e-12 },
    { what: 'total of endosulfan II', source, actual: () => total(7, 91), expected: 98, absolute: 1e-12 },
    { what: 'total of phenol', source, actual: () => total(90, 10), expected: 100, absolute: 1e-12 }
  ]);

  it('forms the SD of a total per replicate: correlated fractions make it smaller than the root of summed squares', () => {
    // Chlordane: 10.07 by root-sum-square of the fractions' SDs, 3.3 published for the total (EPA SW-846, silica gel tables).
    const replicates = [
      { a: 14, b: 29 },
      { a: 20, b: 24 },
      { a: 26, b: 16 }
    ];
    const balance = stats.massBalance({
      replicates,
      fractions: [
        { name: 'a', countsAs: 'method' },
        { name: 'b', countsAs: 'method' }
      ]
    });
    expect(balance.method!.sd).toBeCloseTo(1, 12);
    expect(Math.hypot(balance.fractions[0]!.sd!, balance.fractions[1]!.sd!)).toBeGreaterThan(8);
  });
});

describe('methodDetectionLimit, Method 525.2', () => {
  // The published tables give rounded mean and RSD of 8 replicates; 12 % covers that rounding.
  verify(
    method525.map(({ name, mean, rsd, mdl }): Check => {
      const series = Array.from({ length: 8 }, (_, i) => i);
      const d = stats.describe(series);
      const values = series.map((value) => mean + ((value - d.mean) / d.sd!) * ((mean * rsd) / 100));
      return {
        what: `MDL of ${name}`,
        source: 'EPA Method 525.2, Table 3',
        actual: () => stats.methodDetectionLimit({ spiked: values }).mdl,
        expected: mdl,
        relative: 0.12
      };
    })
  );
  verify(
    method525.map(({ name, mean, spike, accuracy }): Check => ({
      what: `recovery of ${name}`,
      source: 'EPA Method 525.2, Table 3, from the printed mean',
      actual: () => stats.recovery({ found: mean, spiked: spike }),
      expected: accuracy,
      absolute: 1.6
    }))
  );
});

describe('factors printed in methods', () => {
  const unit = (n: number) => {
    const series = Array.from({ length: n }, (_, i) => i);
    const { sd } = stats.describe(series);
    return series.map((value) => value / sd!);
  };
  const t99: readonly (readonly [number, number])[] = [
    [7, 3.143],
    [8, 2.998],
    [9, 2.896],
    [10, 2.821],
    [11, 2.764],
    [16, 2.602],
    [21, 2.528],
    [26, 2.485],
    [31, 2.457],
    [61, 2.39],
    [100, 2.365]
  ];
  verify([
    ...t99.map(([n, t]): Check => ({
      what: `t(${n - 1}, 0.99)`,
      source: '40 CFR 136 Appendix B, table of t',
      actual: () => stats.methodDetectionLimit({ spiked: unit(n) }).fromSpiked,
      expected: t,
      absolute: 5e-4
    })),
    {
      what: 'half range of prediction at n = 7, in SD',
      source: 'EPA Method 539, half range of prediction',
      actual: () => stats.quantitationConfirmation({ values: unit(7), fortified: 1 }).halfRange,
      expected: 3.963,
      absolute: 5e-4
    },
    {
      what: 'RPD of 110 and 94.1',
      source: 'EPA Method 625.1, 8.3: 200 |A1 - A2|/(A1 + A2), worked by hand',
      actual: () => stats.relativePercentDifference(110, 94.1),
      expected: (200 * 15.9) / 204.1,
      relative: 1e-14
    }
  ]);
});
