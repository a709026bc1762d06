import { describe } from 'vitest';
import * as stats from '../../src/lib/server/stats/index';
import { leastSquares } from '../../src/lib/server/stats/least-squares';
import { verify, type Check } from './check';

const points = (x: readonly number[], y: readonly number[]) => x.map((value, i) => ({ x: value, y: y[i]! }));
const t = (df: number) => {
  // Half width of an interval of n values with unit standard error, so that only public functions are used.
  const values = Array.from({ length: df + 1 }, (_, i) => i);
  const d = stats.describe(values);
  return (d.ci!.upper - d.mean) / d.se!;
};

describe('calibration of fluorescein', () => {
  const source = 'Miller and Miller, Statistics and Chemometrics for Analytical Chemistry (data from memory)';
  const fit = stats.fitCalibration(points([0, 2, 4, 6, 8, 10, 12], [2.1, 5.0, 9.0, 12.6, 17.3, 21.0, 24.7]), {
    model: 'linear',
    weighting: 'none'
  });
  const read = (y: number) => stats.solveCalibration(fit, y);
  verify([
    { what: 'slope', source, actual: () => fit.coefficients[1]!, expected: 1.930357, absolute: 5e-7 },
    { what: 'intercept', source, actual: () => fit.coefficients[0]!, expected: 1.517857, absolute: 5e-7 },
    { what: 'correlation', source, actual: () => Math.sqrt(fit.r2!), expected: 0.99888, absolute: 5e-6 },
    { what: 'residual SD', source, actual: () => fit.residualSd, expected: 0.432848, absolute: 5e-7 },
    {
      what: 'SD of the slope',
      source,
      actual: () => fit.standardErrors[1]!,
      expected: 0.0409,
      absolute: 5e-7
    },
    {
      what: 'SD of the intercept',
      source,
      actual: () => fit.standardErrors[0]!,
      expected: 0.294936,
      absolute: 5e-7
    },
    ...(
      [
        [2.9, 0.716, 0.68],
        [13.5, 6.2072, 0.6163],
        [23.0, 11.1286, 0.6766]
      ] as const
    ).flatMap(([y, x, half]): Check[] => [
      { what: `level at response ${y}`, source, actual: () => read(y).x, expected: x, absolute: 5e-4 },
      {
        what: `95 % half width at response ${y}`,
        source,
        actual: () => read(y).se! * t(5),
        expected: half,
        absolute: 5e-4
      }
    ])
  ]);
});

describe('weighted line through six levels', () => {
  // Weights 1/s^2 given level by level: the fit behind fitCalibration, with the book's own weights.
  const source = 'Miller and Miller, weighted regression (data from memory)';
  const x = [0, 2, 4, 6, 8, 10];
  const y = [0.009, 0.158, 0.301, 0.472, 0.577, 0.739];
  const s = [0.001, 0.004, 0.01, 0.013, 0.017, 0.022];
  const weighted = leastSquares(
    [s.map((sd) => 1 / sd), x.map((value, i) => value / s[i]!)],
    y.map((value, i) => value / s[i]!)
  );
  const plain = stats.fitCalibration(points(x, y), { model: 'linear', weighting: 'none' });
  verify([
    {
      what: 'weighted slope',
      source,
      actual: () => weighted.coefficients[1]!,
      expected: 0.07376,
      absolute: 5e-8
    },
    {
      what: 'weighted intercept',
      source,
      actual: () => weighted.coefficients[0]!,
      expected: 0.0090839,
      absolute: 5e-8
    },
    {
      what: 'unweighted slope',
      source,
      actual: () => plain.coefficients[1]!,
      expected: 0.0725429,
      absolute: 5e-8
    },
    {
      what: 'unweighted intercept',
      source,
      actual: () => plain.coefficients[0]!,
      expected: 0.0132857,
      absolute: 5e-8
    }
  ]);
});

describe('inverse reading with its error', () => {
  const source =
    'Massart et al., Handbook of Chemometrics A (1997), example 1, as in tests of the R package chemCal';
  const fit = stats.fitCalibration(points([0, 10, 20, 30, 40, 50], [4.0, 21.2, 44.6, 61.8, 78.0, 105.2]), {
    model: 'linear',
    weighting: 'none'
  });
  const at15 = stats.solveCalibration(fit, 15);
  const at90 = stats.solveCalibration(fit, 90);
  const fiveAt90 = stats.solveCalibration(fit, 90, { replicates: 5 });
  verify([
    { what: 'level at 15', source, actual: () => at15.x, expected: 6.09381, absolute: 5e-6 },
    { what: 'its standard error', source, actual: () => at15.se, expected: 1.767278, absolute: 5e-7 },
    {
      what: 'its 95 % half width',
      source,
      actual: () => at15.se! * t(4),
      expected: 4.906751,
      absolute: 5e-7
    },
    { what: 'level at 90', source, actual: () => at90.x, expected: 43.93983, absolute: 5e-6 },
    {
      what: 'its 95 % half width',
      source,
      actual: () => at90.se! * t(4),
      expected: 4.908053,
      absolute: 5e-7
    },
    {
      what: '95 % half width of the mean of five',
      source,
      actual: () => fiveAt90.se! * t(4),
      expected: 3.168489,
      absolute: 5e-7
    }
  ]);
});

describe('standard addition', () => {
  // The level that answers with nothing, on the line through seven additions; its error is that of the line alone, so that the
  // reading of the response counts as made without end.
  const source = 'Miller and Miller, standard addition (data from memory)';
  const fit = stats.fitCalibration(
    points([0, 5, 10, 15, 20, 25, 30], [0.32, 0.41, 0.52, 0.6, 0.7, 0.77, 0.89]),
    { model: 'linear', weighting: 'none' }
  );
  const nothing = stats.solveCalibration(fit, 0, { replicates: 1e15 });
  verify([
    { what: 'slope', source, actual: () => fit.coefficients[1]!, expected: 0.0186429, absolute: 5e-8 },
    { what: 'intercept', source, actual: () => fit.coefficients[0]!, expected: 0.3217857, absolute: 5e-8 },
    { what: 'residual SD', source, actual: () => fit.residualSd, expected: 0.010922, absolute: 5e-7 },
    { what: 'level added to', source, actual: () => -nothing.x!, expected: 17.2605, absolute: 5e-5 },
    { what: 'its standard error', source, actual: () => nothing.se, expected: 0.74787, absolute: 5e-6 },
    { what: 'its 95 % half width', source, actual: () => nothing.se! * t(5), expected: 1.92, absolute: 0.005 }
  ]);
});

describe('DIN 32645', () => {
  const source = 'DIN 32645 example, as in tests of the R package chemCal';
  const x = Array.from({ length: 10 }, (_, i) => (i + 1) / 20);
  const fit = stats.fitCalibration(points(x, [3060, 3522, 3707, 4280, 5058, 5510, 5703, 6205, 7156, 7178]), {
    model: 'linear',
    weighting: 'none'
  });
  const slope = fit.coefficients[1]!;
  const limits = stats.detectionLimits({ sigma: fit.residualSd, slope });
  const at3500 = stats.solveCalibration(fit, 3500);
  verify([
    { what: 'slope', source, actual: () => slope, expected: 9661.9394, absolute: 5e-5 },
    { what: 'intercept', source, actual: () => fit.coefficients[0]!, expected: 2480.8667, absolute: 5e-5 },
    { what: 'residual SD', source, actual: () => fit.residualSd, expected: 192.2939, absolute: 5e-5 },
    {
      what: 'SD of the procedure',
      source,
      actual: () => fit.residualSd / slope,
      expected: 0.019902,
      absolute: 5e-7
    },
    { what: 'level at 3500', source, actual: () => at3500.x, expected: 0.10548, absolute: 5e-6 },
    {
      what: '99 % half width at 3500',
      source,
      actual: () => at3500.se! * 3.355387,
      expected: 0.07434,
      absolute: 5e-6
    },
    // At the response of the intercept the level is zero, and its one-sided 99 % bound the critical value.
    {
      what: 'critical value at 1 %',
      source,
      actual: () => stats.solveCalibration(fit, fit.coefficients[0]!).se! * 2.896459,
      expected: 0.0698127,
      absolute: 5e-7
    },
    {
      what: 'detection limit 3.3 sigma/slope',
      source: 'ICH Q2 formula (from memory) on the same data',
      actual: () => limits.lod,
      expected: 0.06568,
      absolute: 5e-6
    },
    {
      what: 'quantitation limit 10 sigma/slope',
      source: 'ICH Q2 formula (from memory) on the same data',
      actual: () => limits.loq,
      expected: 0.19902,
      absolute: 5e-6
    }
  ]);
});

describe('response factors', () => {
  // SW-846 8000D notes that the average response factor equals a 1/x2 weighted fit through zero, and that with it the RSE
  // equals the RSD of the response factors up to the levels' own read-back: checked by hand on three levels.
  // Published figures can be smaller: EPA's report on its method for 6PPD-quinone prints RSE of 2.70, 1.44 and 4.96 % for lines
  // through seven levels, which its data give with n - 1 (2.67, 1.44, 4.95); with n - 2, as 8000D has it for a line, they are
  // sqrt(6/5) times as large (2.93, 1.57, 5.43).
  const source = 'EPA SW-846 Method 8000D, 11.5, worked by hand';
  const fit = stats.fitCalibration(points([1, 2, 4], [10, 22, 36]), {
    model: 'average response factor',
    weighting: 'none'
  });
  // Response factors 10, 11, 9: mean 10, SD 1. Read back: 1, 2.2, 3.6: errors 0, 10, -10 %.
  verify([
    {
      what: 'mean response factor',
      source,
      actual: () => fit.coefficients[0]!,
      expected: 10,
      relative: 1e-15
    },
    {
      what: 'RSD of response factors',
      source,
      actual: () => fit.responseFactorRsd,
      expected: 10,
      relative: 1e-14
    },
    { what: 'RSE', source, actual: () => fit.rse, expected: 10, relative: 1e-13 },
    {
      what: 'RSE of a line through three levels, n - p = 1',
      source,
      // y = x but for the middle, which is one third high: the line is raised by 1/9 everywhere, read-back errors -1/9, 1/9, -1/27.
      actual: () =>
        stats.fitCalibration(points([1, 2, 3], [1, 2 + 1 / 3, 3]), { model: 'linear', weighting: 'none' })
          .rse,
      expected: 100 * Math.sqrt((1 / 9) ** 2 + (1 / 9) ** 2 + (1 / 27) ** 2),
      relative: 1e-12
    },
    {
      what: 'error at the second level',
      source,
      actual: () => fit.points[1]!.errorPercent,
      expected: 10,
      relative: 1e-13
    }
  ]);
});
