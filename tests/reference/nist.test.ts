import { describe } from 'vitest';
import * as stats from '../../src/lib/server/stats/index';
import { leastSquares } from '../../src/lib/server/stats/least-squares';
import { verify, type Check } from './check';
import { atomicWeightOfSilver, gearDiameters, siliconResistivity, simonLesage } from './data/nist-anova';
import { filip, longley, noInt1, noInt2, norris, pontius, wampler } from './data/nist-regression';
import { univariateSets } from './data/nist-univariate';

describe('describe, NIST StRD univariate sets', () => {
  verify(
    univariateSets.flatMap(({ name, values, mean, sd, tolerance }): Check[] => {
      const source = `NIST StRD, ${name}, certified`;
      const d = stats.describe(values);
      return [
        { what: `mean of ${name}`, source, actual: () => d.mean, expected: mean, relative: 1e-15 },
        { what: `SD of ${name}`, source, actual: () => d.sd, expected: sd, relative: tolerance }
      ];
    })
  );
});

describe('oneWayAnova, NIST StRD analysis of variance', () => {
  const sets: readonly (readonly [
    string,
    readonly (readonly number[])[],
    number,
    number,
    number,
    number,
    number
  ])[] = [
    // Between SS, within SS, F, residual SD; the tolerance is what seven constant leading digits leave of a double.
    [
      'AtmWtAg',
      atomicWeightOfSilver,
      3.638341875e-9,
      1.04951729166667e-8,
      15.946733567793,
      1.5104831444641e-5,
      1e-9
    ],
    ['SiRstv', siliconResistivity, 0.0511462616, 0.21663656, 1.18046237440255, 0.104076068334656, 1e-12],
    ['SmLs01', simonLesage('1'), 1.68, 1.8, 21, 0.1, 1e-13],
    ['SmLs04', simonLesage('1000000'), 1.68, 1.8, 21, 0.1, 1e-9],
    // Thirteen constant leading digits: the data themselves are off by 2e-5 as doubles.
    ['SmLs07', simonLesage('1000000000000'), 1.68, 1.8, 21, 0.1, 5e-4]
  ];
  verify(
    sets.flatMap(([name, groups, between, within, f, sd, relative]): Check[] => {
      const source = `NIST StRD, ${name}, certified`;
      const a = stats.oneWayAnova(groups);
      return [
        { what: `${name} between SS`, source, actual: () => a.between.ss, expected: between, relative },
        { what: `${name} within SS`, source, actual: () => a.within.ss, expected: within, relative },
        { what: `${name} F`, source, actual: () => a.f, expected: f, relative },
        { what: `${name} residual SD`, source, actual: () => Math.sqrt(a.within.ms), expected: sd, relative }
      ];
    })
  );
});

describe('gear diameters, NIST/SEMATECH e-Handbook', () => {
  const all = stats.describe(gearDiameters.flat());
  const anova = stats.oneWayAnova(gearDiameters);
  const levene = stats.brownForsythe(gearDiameters);
  const own = 'GEAR.DAT, computed by scipy from the data';
  verify([
    { what: 'grand mean', source: own, actual: () => all.mean, expected: 0.99764, relative: 1e-12 },
    { what: 'SD', source: own, actual: () => all.sd, expected: 0.0062789, absolute: 5e-8 },
    {
      what: 'lower bound of the SD',
      source: own,
      actual: () => all.sdCi!.lower,
      expected: 0.0055129,
      absolute: 5e-8
    },
    {
      what: 'upper bound of the SD',
      source: own,
      actual: () => all.sdCi!.upper,
      expected: 0.007294,
      absolute: 5e-8
    },
    { what: 'F', source: own, actual: () => anova.f, expected: 2.2969, absolute: 5e-5 },
    { what: 'p', source: own, actual: () => anova.p, expected: 0.0227, absolute: 5e-5 },
    // The handbook prints 1.705910; the data give 1.705918, in R too.
    {
      what: 'test of equal variances about medians',
      source: 'NIST/SEMATECH e-Handbook 1.3.5.10',
      actual: () => levene.f,
      expected: 1.70591,
      absolute: 1e-5
    },
    { what: 'its p', source: own, actual: () => levene.p, expected: 0.0991, absolute: 5e-5 }
  ]);
});

describe('grubbs, NIST/SEMATECH e-Handbook', () => {
  const values = [199.31, 199.53, 200.19, 200.82, 201.92, 201.95, 202.18, 245.57];
  const high = stats.grubbs(values, { side: 'high' });
  const both = stats.grubbs(values);
  const source = 'NIST/SEMATECH e-Handbook 1.3.5.17';
  verify([
    { what: 'G', source, actual: () => high.statistic, expected: 2.4687646, absolute: 5e-8 },
    { what: 'one-sided limit', source, actual: () => high.critical, expected: 2.032, absolute: 5e-4 },
    {
      what: 'two-sided limit',
      source: 'formula, by scipy',
      actual: () => both.critical,
      expected: 2.126645,
      absolute: 5e-7
    },
    { what: 'index of the outlier', source, actual: () => high.index, expected: 7, absolute: 0 }
  ]);
});

describe('fitCalibration, NIST StRD regression', () => {
  const line = stats.fitCalibration(norris, { model: 'linear', weighting: 'none' });
  const curve = stats.fitCalibration(pontius, { model: 'quadratic', weighting: 'none' });
  const n = 'NIST StRD, Norris, certified';
  const p = 'NIST StRD, Pontius, certified';
  const relative = 1e-11;
  verify([
    {
      what: 'Norris B0',
      source: n,
      actual: () => line.coefficients[0]!,
      expected: -0.262323073774029,
      relative
    },
    {
      what: 'Norris B1',
      source: n,
      actual: () => line.coefficients[1]!,
      expected: 1.00211681802045,
      relative
    },
    {
      what: 'Norris SD of B0',
      source: n,
      actual: () => line.standardErrors[0]!,
      expected: 0.232818234301152,
      relative
    },
    {
      what: 'Norris SD of B1',
      source: n,
      actual: () => line.standardErrors[1]!,
      expected: 4.29796848199937e-4,
      relative
    },
    {
      what: 'Norris residual SD',
      source: n,
      actual: () => line.residualSd,
      expected: 0.884796396144373,
      relative
    },
    { what: 'Norris r2', source: n, actual: () => line.r2, expected: 0.999993745883712, relative },
    {
      what: 'Pontius B0',
      source: p,
      actual: () => curve.coefficients[0]!,
      expected: 6.73565789473684e-4,
      relative
    },
    {
      what: 'Pontius B1',
      source: p,
      actual: () => curve.coefficients[1]!,
      expected: 7.32059160401003e-7,
      relative
    },
    {
      what: 'Pontius B2',
      source: p,
      actual: () => curve.coefficients[2]!,
      expected: -3.16081871345029e-15,
      relative
    },
    {
      what: 'Pontius SD of B0',
      source: p,
      actual: () => curve.standardErrors[0]!,
      expected: 1.07938612033077e-4,
      relative
    },
    {
      what: 'Pontius SD of B1',
      source: p,
      actual: () => curve.standardErrors[1]!,
      expected: 1.57817399981659e-10,
      relative
    },
    {
      what: 'Pontius SD of B2',
      source: p,
      actual: () => curve.standardErrors[2]!,
      expected: 4.86652849992036e-17,
      relative
    }
  ]);
});

describe('leastSquares, NIST StRD regression', () => {
  const origin = (points: readonly { x: number; y: number }[]) => {
    const fit = leastSquares(
      [points.map(({ x }) => x)],
      points.map(({ y }) => y)
    );
    return {
      slope: fit.coefficients[0]!,
      sd: Math.sqrt((fit.residualSumOfSquares / (points.length - 1)) * fit.unscaledCovariance[0]![0]!)
    };
  };
  const one = origin(noInt1);
  const two = origin(noInt2);
  const powers = Array.from({ length: 6 }, (_, k) => Array.from({ length: 21 }, (__, x) => x ** k));
  // Standard deviations of Wampler 3; those of Wampler 4 are a hundred times as large.
  const deviations = [
    2152.3262467817, 2363.55173469681, 779.343524331583, 101.47550755035, 5.64566512170752, 0.112324854679312
  ];
  const polynomial = (set: number): Check[] => {
    const fit = leastSquares(powers, wampler[set]!);
    const source = `NIST StRD, Wampler${set + 1}, certified`;
    // Raw powers up to 20^5 have a condition number near 1e7; noise of 1e5 in Wampler 4 is amplified by it.
    const absolute = set === 3 ? 1e-6 : 1e-8;
    const checks = fit.coefficients.map((coefficient, k): Check => ({
      what: `Wampler${set + 1} B${k}`,
      source,
      actual: () => coefficient,
      expected: set === 1 ? 10 ** -k : 1,
      absolute
    }));
    if (set < 2) return checks;
    const scale = set === 2 ? 1 : 100;
    const sigma2 = fit.residualSumOfSquares / 15;
    return checks.concat(
      deviations.map((sd, k) => ({
        what: `Wampler${set + 1} SD of B${k}`,
        source,
        actual: () => Math.sqrt(sigma2 * fit.unscaledCovariance[k]![k]!),
        expected: sd * scale,
        relative: 1e-9
      }))
    );
  };
  verify([
    {
      what: 'NoInt1 slope',
      source: 'NIST StRD, NoInt1, certified',
      actual: () => one.slope,
      expected: 2.07438016528926,
      relative: 1e-13
    },
    {
      what: 'NoInt1 SD',
      source: 'NIST StRD, NoInt1, certified',
      actual: () => one.sd,
      expected: 0.0165289256198347,
      relative: 1e-13
    },
    {
      what: 'NoInt2 slope',
      source: 'NIST StRD, NoInt2, certified',
      actual: () => two.slope,
      expected: 0.727272727272727,
      relative: 1e-13
    },
    {
      what: 'NoInt2 SD',
      source: 'NIST StRD, NoInt2, certified',
      actual: () => two.sd,
      expected: 0.0420827318078432,
      relative: 1e-13
    },
    ...[0, 1, 2, 3].flatMap(polynomial)
  ]);
});

describe('leastSquares on centred and scaled columns, NIST StRD sets of higher difficulty', () => {
  const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0);

  // Filip: powers of u = (x - centre)/scale, taken back to powers of x.
  const [lowest, highest] = [Math.min(...filip.map(({ x }) => x)), Math.max(...filip.map(({ x }) => x))];
  const [centre, scale] = [(lowest + highest) / 2, (highest - lowest) / 2];
  const degrees = Array.from({ length: 11 }, (_, k) => k);
  const fit = leastSquares(
    degrees.map((k) => filip.map(({ x }) => ((x - centre) / scale) ** k)),
    filip.map(({ y }) => y)
  );
  const choose = (n: number, k: number): number =>
    Array.from({ length: k }, (_, i) => (n - i) / (i + 1)).reduce((product, part) => product * part, 1);
  const back = degrees.map((k) =>
    degrees.map((j) => (j < k ? 0 : (choose(j, k) * (-centre) ** (j - k)) / scale ** j))
  );
  const certified: readonly (readonly [b: number, sd: number])[] = [
    [-1467.4896142298, 298.084530995537],
    [-2772.17959193342, 559.77986547495],
    [-2316.37108160893, 466.477572127796],
    [-1127.97394098372, 227.204274477751],
    [-354.478233703349, 71.6478660875927],
    [-75.1242017393757, 15.28971787474],
    [-10.8753180355343, 2.23691159816033],
    [-1.06221498588947, 0.221624321934227],
    [-0.0670191154593408, 0.0142363763154724],
    [-0.00246781078275479, 5.35617408889821e-4],
    [-4.02962525080404e-5, 8.96632837373868e-6]
  ];
  const sigma2 = fit.residualSumOfSquares / 71;
  const filipSource = 'NIST StRD, Filip, certified (figures from memory, recomputed with 80 digits)';

  // Longley: each variable less its mean and over its root of squares; the constant taken back from the means.
  const count = longley.length;
  const variables = Array.from({ length: 6 }, (_, j) => longley.map(([row]) => row[j]!));
  const means = variables.map((column) => sum(column) / count);
  const lengths = variables.map((column, j) => Math.hypot(...column.map((value) => value - means[j]!)));
  const meanY = sum(longley.map(([, y]) => y)) / count;
  const local = leastSquares(
    variables.map((column, j) => column.map((value) => (value - means[j]!) / lengths[j]!)),
    longley.map(([, y]) => y - meanY)
  );
  const slopes = local.coefficients.map((coefficient, j) => coefficient / lengths[j]!);
  const longleySigma2 = local.residualSumOfSquares / (count - 7);
  const employed: readonly (readonly [b: number, sd: number])[] = [
    [15.0618722713733, 84.9149257747669],
    [-0.035819179292591, 0.0334910077722432],
    [-2.02022980381683, 0.488399681651699],
    [-1.03322686717359, 0.214274163161675],
    [-0.0511041056535807, 0.22607320006937],
    [1829.15146461355, 455.478499142212]
  ];
  const longleySource = 'NIST StRD, Longley, certified (figures from memory, recomputed with 80 digits)';

  verify([
    ...certified.flatMap(([b, sd], k): Check[] => [
      {
        what: `Filip B${k}`,
        source: filipSource,
        actual: () => sum(back[k]!.map((weight, j) => weight * fit.coefficients[j]!)),
        expected: b,
        relative: 1e-7
      },
      {
        what: `Filip SD of B${k}`,
        source: filipSource,
        actual: () =>
          Math.sqrt(
            sigma2 *
              sum(back[k]!.flatMap((a, i) => back[k]!.map((c, j) => a * c * fit.unscaledCovariance[i]![j]!)))
          ),
        expected: sd,
        relative: 1e-6
      }
    ]),
    {
      what: 'Filip residual SD',
      source: filipSource,
      actual: () => Math.sqrt(sigma2),
      expected: 0.00334801051324544,
      relative: 1e-11
    },
    ...employed.flatMap(([b, sd], j): Check[] => [
      {
        what: `Longley B${j + 1}`,
        source: longleySource,
        actual: () => slopes[j]!,
        expected: b,
        relative: 1e-10
      },
      {
        what: `Longley SD of B${j + 1}`,
        source: longleySource,
        actual: () => Math.sqrt(longleySigma2 * local.unscaledCovariance[j]![j]!) / lengths[j]!,
        expected: sd,
        relative: 1e-10
      }
    ]),
    {
      what: 'Longley B0',
      source: longleySource,
      actual: () => meanY - sum(slopes.map((slope, j) => slope * means[j]!)),
      expected: -3482258.63459582,
      relative: 1e-10
    },
    {
      what: 'Longley residual SD',
      source: longleySource,
      actual: () => Math.sqrt(longleySigma2),
      expected: 304.854073561965,
      relative: 1e-11
    }
  ]);
});
