import { describe } from 'vitest';
import * as stats from '../../src/lib/server/stats/index';
import { studentizedRangeQuantile } from '../../src/lib/server/stats/studentized-range';
import { verify, type Check } from './check';

const apricot = [
  [25.05, 25.58],
  [26.29, 27.16],
  [27.64, 28.14],
  [29.01, 26.39],
  [26.99, 27.85],
  [24.45, 24.15],
  [26.85, 27.37],
  [27.21, 27.34],
  [25.31, 25.43]
];

describe('welch and tost', () => {
  const range = (from: number, to: number) => Array.from({ length: to - from + 1 }, (_, i) => from + i);
  const plain = stats.welch(range(1, 10), range(7, 20));
  const outlying = stats.welch(range(1, 10), [...range(7, 20), 200]);
  const example = 'R, example of t.test';
  const clinic = stats.tost(
    [2.84, 2.51, 2.41, 2.95, 3.14, 3.79, 4.14, 3.85, 3.02, 3.45, 5.37, 3.81, 4.19, 3.16, 3.84],
    [2.6, 2.82, 2.18, 3.46, 4.01, 3.04, 3.47, 4.06, 2.91, 3.59, 4.51, 3.16, 3.86, 3.31, 3.02],
    0.6
  );
  const equivalence = 'clinic data in the tests of statsmodels, values from R';
  verify([
    { what: 't', source: example, actual: () => plain.t, expected: -5.4349, absolute: 5e-5 },
    { what: 'df', source: example, actual: () => plain.df, expected: 21.982, absolute: 5e-4 },
    { what: 'p', source: example, actual: () => plain.p, expected: 1.855e-5, absolute: 5e-9 },
    {
      what: 'lower bound',
      source: example,
      actual: () => plain.ci!.lower,
      expected: -11.052802,
      absolute: 5e-7
    },
    {
      what: 'upper bound',
      source: example,
      actual: () => plain.ci!.upper,
      expected: -4.947198,
      absolute: 5e-7
    },
    {
      what: 't with 200 added',
      source: example,
      actual: () => outlying.t,
      expected: -1.6329,
      absolute: 5e-5
    },
    {
      what: 'df with 200 added',
      source: example,
      actual: () => outlying.df,
      expected: 14.165,
      absolute: 5e-4
    },
    { what: 'p with 200 added', source: example, actual: () => outlying.p, expected: 0.1245, absolute: 5e-5 },
    {
      what: 'clinic difference',
      source: equivalence,
      actual: () => clinic.difference,
      expected: 0.1646667,
      absolute: 5e-8
    },
    { what: 'clinic df', source: equivalence, actual: () => clinic.df, expected: 26.7485, absolute: 5e-5 },
    { what: 'clinic p', source: equivalence, actual: () => clinic.p, expected: 0.0485308, absolute: 5e-8 },
    {
      what: 'clinic lower 90 % bound',
      source: equivalence,
      actual: () => clinic.ci!.lower,
      expected: -0.266686,
      absolute: 5e-7
    },
    {
      what: 'clinic upper 90 % bound',
      source: equivalence,
      actual: () => clinic.ci!.upper,
      expected: 0.59602,
      absolute: 5e-6
    }
  ]);
});

describe('powerTwoSample and replicatesForDifference', () => {
  const help = 'R, examples of power.t.test';
  const counts: readonly (readonly [sd: number, difference: number, n: number])[] = [
    [5, 10, 6],
    [10, 10, 17],
    [10, 15, 9],
    [15, 20, 10]
  ];
  verify([
    // R prints the power of the near tail only (strict = FALSE): the far one adds 1e-7 here.
    {
      what: 'power',
      source: help,
      actual: () => stats.powerTwoSample({ difference: 1, sd: 1, n: 20 }),
      expected: 0.8689528,
      absolute: 3e-7
    },
    {
      what: 'n for 90 % (22.02110)',
      source: help,
      actual: () => stats.replicatesForDifference({ difference: 1, sd: 1, power: 0.9 }),
      expected: 23,
      absolute: 0
    },
    {
      what: 'n for 90 %, one-sided (17.84713)',
      source: help,
      actual: () => stats.replicatesForDifference({ difference: 1, sd: 1, power: 0.9, sides: 1 }),
      expected: 18,
      absolute: 0
    },
    ...counts.map(([sd, difference, n]): Check => ({
      what: `n to find ${difference} at SD ${sd}`,
      source: 'computed by scipy',
      actual: () => stats.replicatesForDifference({ difference, sd }),
      expected: n,
      absolute: 0
    }))
  ]);
});

describe('studentized range', () => {
  // Table of the upper 5 % and 1 % points (Pearson and Hartley, Biometrika Tables; from memory), three decimals or four figures.
  const table: readonly (readonly [alpha: number, k: number, df: number, q: number])[] = [
    [0.05, 2, 2, 6.085],
    [0.05, 2, 10, 3.151],
    [0.05, 3, 1, 26.98],
    [0.05, 3, 2, 8.331],
    [0.05, 3, 3, 5.91],
    [0.05, 3, 10, 3.877],
    [0.05, 4, 5, 5.218],
    [0.05, 4, 12, 4.199],
    [0.05, 5, 20, 4.232],
    [0.05, 10, 5, 6.995],
    [0.05, 10, 60, 4.646],
    [0.01, 3, 10, 5.27],
    [0.01, 4, 20, 5.018]
  ];
  verify(
    table.map(([alpha, k, df, q]): Check => ({
      what: `q(${alpha}; ${k}, ${df})`,
      source: 'published table (from memory)',
      actual: () => studentizedRangeQuantile(alpha, k, df),
      expected: q,
      absolute: q > 20 ? 0.005 : 0.0006
    }))
  );
});

describe('tukeyKramer', () => {
  const source = 'three groups in the tests of scipy, values from SAS and Matlab';
  const groups = [
    [24.5, 23.5, 26.4, 27.1, 29.9],
    [28.4, 34.2, 29.5, 32.2, 30.1],
    [26.1, 28.3, 24.3, 26.2, 27.8]
  ];
  const [first, second, third] = stats.tukeyKramer(groups);
  verify([
    {
      what: 'difference of 2 and 1',
      source,
      actual: () => -first!.difference,
      expected: 4.6,
      absolute: 1e-12
    },
    {
      what: 'lower bound of 2 - 1',
      source,
      actual: () => -first!.ci.upper,
      expected: 0.950883,
      absolute: 5e-5
    },
    {
      what: 'upper bound of 2 - 1',
      source,
      actual: () => -first!.ci.lower,
      expected: 8.249117,
      absolute: 5e-5
    },
    { what: 'p of 2 - 1', source, actual: () => first!.p, expected: 0.0144483, absolute: 5e-8 },
    { what: 'p of 2 - 3', source, actual: () => third!.p, expected: 0.0203311, absolute: 5e-8 },
    { what: 'p of 3 - 1', source, actual: () => second!.p, expected: 0.9803107, absolute: 5e-8 }
  ]);
});

describe('oneWayAnova and precisionComponents', () => {
  const barrel = [
    [98.8, 98.7, 98.9, 98.8],
    [99.3, 98.7, 98.8, 99.2],
    [98.3, 98.5, 98.8, 98.8],
    [98.0, 97.7, 97.4, 97.3],
    [99.3, 99.4, 99.9, 99.4]
  ];
  const storage = [
    [102, 100, 101],
    [101, 101, 104],
    [97, 95, 99],
    [90, 92, 94]
  ];
  const book = 'Miller and Miller (data from memory)';
  const fibre = 'Li and Cardozo 1994, apricot fibre, data in the R package metRology; computed by scipy';
  const a = stats.oneWayAnova(barrel);
  const b = stats.precisionComponents(barrel);
  const s = stats.oneWayAnova(storage);
  const f = stats.oneWayAnova(apricot);
  const p = stats.precisionComponents(apricot);
  const c = stats.cochran(apricot);
  verify([
    {
      what: 'barrel, between mean square',
      source: book,
      actual: () => a.between.ms,
      expected: 1.96,
      absolute: 0.005
    },
    {
      what: 'barrel, within mean square',
      source: book,
      actual: () => a.within.ms,
      expected: 0.0653,
      absolute: 5e-5
    },
    { what: 'barrel, F', source: book, actual: () => a.f, expected: 30, absolute: 0.5 },
    {
      what: 'barrel, sampling variance',
      source: book,
      actual: () => b.betweenSd ** 2,
      expected: 0.47,
      absolute: 0.005
    },
    { what: 'fluorescence, F', source: book, actual: () => s.f, expected: 20.67, absolute: 0.005 },
    { what: 'fluorescence, p', source: book, actual: () => s.p, expected: 4.0e-4, absolute: 5e-6 },
    { what: 'apricot, mean', source: fibre, actual: () => p.mean, expected: 26.5672, absolute: 5e-5 },
    {
      what: 'apricot, between mean square',
      source: fibre,
      actual: () => f.between.ms,
      expected: 3.180576,
      absolute: 5e-7
    },
    {
      what: 'apricot, within mean square',
      source: fibre,
      actual: () => f.within.ms,
      expected: 0.51575,
      absolute: 5e-6
    },
    { what: 'apricot, F', source: fibre, actual: () => f.f, expected: 6.1669, absolute: 5e-5 },
    { what: 'apricot, p', source: fibre, actual: () => f.p, expected: 0.00665, absolute: 5e-6 },
    {
      what: 'apricot, repeatability SD',
      source: fibre,
      actual: () => p.repeatabilitySd,
      expected: 0.71816,
      absolute: 5e-6
    },
    {
      what: 'apricot, between variance',
      source: fibre,
      actual: () => p.betweenSd ** 2,
      expected: 1.33241,
      absolute: 5e-6
    },
    {
      what: 'apricot, reproducibility SD',
      source: fibre,
      actual: () => p.intermediateSd,
      expected: 1.35947,
      absolute: 5e-6
    },
    { what: 'apricot, Cochran', source: fibre, actual: () => c.statistic, expected: 0.7394, absolute: 5e-5 },
    {
      what: 'apricot, Cochran limit',
      source: fibre,
      actual: () => c.critical,
      expected: 0.6385,
      absolute: 5e-5
    },
    { what: 'apricot, laboratory pointed at', source: fibre, actual: () => c.index, expected: 3, absolute: 0 }
  ]);
});

describe('factorialAnova without replication', () => {
  // Recoveries by chelating agent (A to D) over three days; each cell once, so interaction is the residual.
  const source = 'Miller and Miller, EDTA recoveries (data from memory)';
  const days = [
    [84, 80, 83, 79],
    [79, 77, 80, 79],
    [83, 78, 80, 78]
  ];
  const result = stats.factorialAnova(
    days.flatMap((row, day) =>
      row.map((response, agent) => ({ levels: { agent: 'ABCD'[agent]!, day: String(day + 1) }, response }))
    ),
    { maxOrder: 1 }
  );
  const [agent, day] = result.terms;
  verify([
    { what: 'mean square of agents', source, actual: () => agent!.ms, expected: 9.5556, absolute: 5e-5 },
    { what: 'mean square of days', source, actual: () => day!.ms, expected: 7.75, absolute: 1e-10 },
    {
      what: 'residual mean square',
      source,
      actual: () => result.residual.ms,
      expected: 1.6389,
      absolute: 5e-5
    },
    { what: 'F of agents', source, actual: () => agent!.f, expected: 5.83, absolute: 0.005 },
    { what: 'F of days', source, actual: () => day!.f, expected: 4.73, absolute: 0.005 }
  ]);
});

describe('limits of outlier tests', () => {
  const series = (n: number) => Array.from({ length: n }, (_, i) => i);
  const two: readonly (readonly [number, number])[] = [
    [3, 1.1543],
    [4, 1.4813],
    [5, 1.715],
    [6, 1.8871],
    [7, 2.02],
    [8, 2.1266],
    [10, 2.29],
    [20, 2.7082]
  ];
  const one: readonly (readonly [number, number])[] = [
    [4, 1.4625],
    [6, 1.8221],
    [8, 2.0317],
    [10, 2.1761]
  ];
  const cochran: readonly (readonly [k: number, n: number, c: number])[] = [
    [5, 2, 0.8413],
    [8, 2, 0.6798],
    [10, 2, 0.602],
    [3, 3, 0.8709],
    [6, 3, 0.6161],
    [10, 3, 0.445]
  ];
  verify([
    ...two.map(([n, g]): Check => ({
      what: `Grubbs 5 % two-sided, n = ${n}`,
      source: 'published table, recomputed by scipy',
      actual: () => stats.grubbs(series(n)).critical,
      expected: g,
      absolute: 5.1e-5
    })),
    ...one.map(([n, g]): Check => ({
      what: `Grubbs 5 % one-sided, n = ${n}`,
      source: 'published table, recomputed by scipy',
      actual: () => stats.grubbs(series(n), { side: 'high' }).critical,
      expected: g,
      absolute: 5.1e-5
    })),
    ...cochran.map(([k, n, c]): Check => ({
      what: `Cochran 5 %, ${k} groups of ${n}`,
      source: 'ISO 5725-2 table (from memory), recomputed by scipy',
      actual: () => stats.cochran(series(k).map(() => series(n))).critical,
      expected: c,
      absolute: 5.1e-5
    }))
  ]);
});

describe('describe, factors of the SD interval', () => {
  const table: readonly (readonly [n: number, lower: number, upper: number])[] = [
    [3, 0.521, 6.285],
    [4, 0.566, 3.729],
    [5, 0.599, 2.874],
    [6, 0.624, 2.453],
    [7, 0.644, 2.202],
    [8, 0.661, 2.035],
    [10, 0.688, 1.826],
    [20, 0.76, 1.461]
  ];
  verify(
    table.flatMap(([n, lower, upper]): Check[] => {
      const d = stats.describe(Array.from({ length: n }, (_, i) => i));
      const source = 'table of sqrt((n - 1)/chi-square), computed by scipy';
      return [
        {
          what: `lower factor, n = ${n}`,
          source,
          actual: () => d.sdCi!.lower / d.sd!,
          expected: lower,
          absolute: 5.1e-4
        },
        {
          what: `upper factor, n = ${n}`,
          source,
          actual: () => d.sdCi!.upper / d.sd!,
          expected: upper,
          absolute: 5.1e-4
        }
      ];
    })
  );
});

describe('Horwitz, Thompson and HorRat', () => {
  const curve = 'W. Horwitz: 16 % at 1 ppm, doubling for each factor of 100 (2^(1 - 0.5 log C))';
  verify([
    {
      what: 'Horwitz at 1 ppm',
      source: curve,
      actual: () => stats.horwitzRsd(1e-6),
      expected: 16,
      absolute: 0.01
    },
    {
      what: 'Horwitz at 100 ppb',
      source: curve,
      actual: () => stats.horwitzRsd(1e-7),
      expected: 22.63,
      absolute: 0.01
    },
    {
      what: 'Horwitz at 10 ppb',
      source: curve,
      actual: () => stats.horwitzRsd(1e-8),
      expected: 32,
      absolute: 0.02
    },
    {
      what: 'Horwitz at 1 ppb',
      source: 'AOAC Appendix F (2012), Table D1',
      actual: () => stats.horwitzRsd(1e-9),
      expected: 45,
      absolute: 0.5
    },
    {
      what: 'Horwitz at 1 %',
      source: 'AOAC Appendix F (2012), Table D1',
      actual: () => stats.horwitzRsd(1e-2),
      expected: 4,
      absolute: 0.5
    },
    {
      what: 'Thompson at 10 ppb',
      source: 'M. Thompson, Analyst 125 (2000) 385 (from memory)',
      actual: () => stats.thompsonRsd(1e-8),
      expected: 22,
      absolute: 0
    },
    {
      what: 'Thompson at 1 ppm',
      source: 'M. Thompson, Analyst 125 (2000) 385 (from memory)',
      actual: () => stats.thompsonRsd(1e-6),
      expected: 16,
      absolute: 0.01
    },
    {
      what: 'Thompson at 25 %',
      source: 'M. Thompson, Analyst 125 (2000) 385 (from memory), 0.01 sqrt(c)',
      actual: () => stats.thompsonRsd(0.25),
      expected: 2,
      absolute: 1e-12
    },
    {
      what: 'HorRat of 8 % at 1 ppm',
      source: curve,
      actual: () => stats.horrat(8, 1e-6),
      expected: 0.5,
      absolute: 0.001
    }
  ]);
});

describe('mean recovery held against 100 %', () => {
  // 42 bread samples, mean recovery 90 %, SD 28 %: u = 4.32 %, t = 2.315.
  const source = 'Eurachem/CITAC guide QUAM, example A4 (figures from memory)';
  const series = Array.from({ length: 42 }, (_, i) => i);
  const d = stats.describe(series);
  const result = stats.oneSampleT(
    series.map((value) => 90 + ((value - d.mean) / d.sd!) * 28),
    100
  );
  verify([
    { what: 'standard uncertainty', source, actual: () => result.se, expected: 4.32, absolute: 0.005 },
    { what: '|t|', source, actual: () => Math.abs(result.t!), expected: 2.315, absolute: 0.001 }
  ]);
});

describe('controlLimits', () => {
  const source =
    'EPA SW-846 Method 8000D, 9.6.2: mean -+ 3 s; the blanks of the AOF report (April 2022), mean 0.46, SD 0.473';
  const limits = stats.controlLimits([0.61, 0.31, 1.44, 0.09, 0.06, 0.43, 0.25]);
  verify([
    { what: 'centre', source, actual: () => limits.centre, expected: 0.46, absolute: 0.005 },
    {
      what: 'upper warning limit',
      source,
      actual: () => limits.warning.upper,
      expected: 0.46 + 2 * 0.473,
      absolute: 0.01
    },
    {
      what: 'upper action limit',
      source,
      actual: () => limits.action.upper,
      expected: 0.46 + 3 * 0.473,
      absolute: 0.01
    },
    {
      what: 'lower action limit',
      source,
      actual: () => limits.action.lower,
      expected: 0.46 - 3 * 0.473,
      absolute: 0.01
    }
  ]);
});
