import { describe } from 'vitest';
import * as stats from '../../src/lib/server/stats/index';
import { leastSquares } from '../../src/lib/server/stats/least-squares';
import { verify, type Check } from './check';
import { atomicWeightOfSilver, gearDiameters, siliconResistivity, simonLesage } from './data/nist-anova';
import { noInt1, noInt2, norris, pontius, wampler } from './data/nist-regression';
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
