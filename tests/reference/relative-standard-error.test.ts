import { describe, expect, it } from 'vitest';
import { fitCalibration } from '../../src/lib/server/stats/index';
import { verify } from './check';

/*
 * RSE = 100 sqrt(sum(((x' - x)/x)^2)/(n - p)), EPA SW-846 Method 8000D, revision 5, 11.5.4: p = 1 for an average response factor, 2 for
 * a line, 3 for a quadratic curve. Worked by hand.
 */
const source = 'EPA SW-846 Method 8000D, 11.4 and 11.5.4, worked by hand';
const points = (x: readonly number[], y: readonly number[]) => x.map((level, i) => ({ x: level, y: y[i]! }));

describe('response factors against an internal standard, and their relative standard error', () => {
  // RF = A_s C_is/(A_is C_s), C_is = 10, A_is = 1000; A_s 10.3, 41, 495, 2020 at C_s 0.1, 0.4, 5, 20: RF 1.03, 1.025, 0.99, 1.01.
  // Their mean is 1.01375; the squares of their deviations over it sum to (0.01625^2 + 0.01125^2 + 0.02375^2 + 0.00375^2)/1.01375^2.
  const levels = [0.1, 0.4, 5, 20];
  const areas = [10.3, 41, 495, 2020];
  const fit = fitCalibration(
    points(
      levels.map((c) => c / 10),
      areas.map((a) => a / 1000)
    ),
    { model: 'average response factor', weighting: 'none' }
  );
  verify([
    {
      what: 'mean response factor',
      source,
      actual: () => fit.coefficients[0]!,
      expected: 1.01375,
      absolute: 1e-12
    },
    { what: 'RSE with n - 1', source, actual: () => fit.rse, expected: 1.772615, absolute: 5e-7 },
    {
      what: 'RSD of the response factors, the same',
      source,
      actual: () => fit.responseFactorRsd,
      expected: 1.772615,
      absolute: 5e-7
    }
  ]);
});

describe('relative standard error of a line', () => {
  // x 1 to 5, y 1.1 1.9 3.0 4.1 4.9: Sxy 9.8, Sxx 10, so y = 0.06 + 0.98 x; x' - x = 0.06/0.98 (1, -2, 0, 2, -1), in percent of x
  // 6.1224, -6.1224, 0, 3.0612, -1.2245; squares sum to 85.8392.
  const fit = fitCalibration(points([1, 2, 3, 4, 5], [1.1, 1.9, 3.0, 4.1, 4.9]), {
    model: 'linear',
    weighting: 'none'
  });
  verify([
    { what: 'slope', source, actual: () => fit.coefficients[1]!, expected: 0.98, absolute: 1e-12 },
    {
      what: 'error of the lowest level',
      source,
      actual: () => fit.points[0]!.errorPercent,
      expected: 6.122449,
      absolute: 5e-7
    },
    {
      what: 'RSE with n - 2',
      source,
      actual: () => fit.rse,
      expected: Math.sqrt(85.839234 / 3),
      absolute: 5e-7
    }
  ]);
});

describe('relative standard error of a quadratic curve', () => {
  // y = 10 x + 0.1 (-1, 2, 0, -2, 1): what is added is orthogonal to 1, x and x^2 over x 1 to 5, so the curve is y = 10 x and reads the
  // levels back -1, 1, 0, -0.5 and 0.2 % off; squares sum to 2.29.
  const fit = fitCalibration(points([1, 2, 3, 4, 5], [9.9, 20.2, 30, 39.8, 50.1]), {
    model: 'quadratic',
    weighting: 'none'
  });
  verify([
    { what: 'RSE with n - 3', source, actual: () => fit.rse, expected: Math.sqrt(2.29 / 2), absolute: 1e-9 }
  ]);
});

describe('published relative standard errors that divide by n - 1', () => {
  /*
   * Lines through seven levels of 6PPD-quinone in a validation report of the EPA (Research Summary, draft SPE method, Nov 2023) are
   * printed with RSE 2.70, 1.44 and 4.96 %. From the back-calculated percentages printed there, dividing by n - 1 = 6 gives 2.674, 1.435
   * and 4.954 (the percentages are rounded); 8000D divides by n - 2 = 5 for a line, which gives 2.929, 1.572 and 5.427. This program
   * prints the latter. The two differ by sqrt(6/5) whatever the data.
   */
  const seven = points([1, 2, 5, 10, 20, 50, 100], [1.03, 1.98, 5.2, 9.7, 20.3, 49.6, 100.4]);
  const fit = fitCalibration(seven, { model: 'linear', weighting: '1/x' });
  const byOneLess = Math.sqrt(fit.points.reduce((sum, { errorPercent }) => sum + errorPercent! ** 2, 0) / 6);

  it.each([
    [2.674, 2.929],
    [1.435, 1.572],
    [4.954, 5.427]
  ])('%s %% by n - 1 is %s %% by n - 2', (printed, ours) => {
    expect((printed * fit.rse!) / byOneLess).toBeCloseTo(ours, 2);
  });
});
