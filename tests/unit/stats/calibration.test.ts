import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import {
  fitCalibration,
  solveCalibration,
  type CalibrationWeighting
} from '../../../src/lib/server/stats/index';
import { near } from './arbitrary';

const weightings: readonly CalibrationWeighting[] = ['none', '1/x', '1/x2'];
const levels = [1, 2, 5, 10, 20, 50];
const curve = (height: (x: number) => number) => levels.map((x) => ({ x, y: height(x) }));

suite('fitCalibration', () => {
  it('finds an exact line or parabola under every weighting', () => {
    for (const weighting of weightings) {
      const line = fitCalibration(
        curve((x) => 3 + 2 * x),
        { model: 'linear', weighting }
      );
      expect(line.coefficients).toEqual([3, 2].map((c) => expect.closeTo(c, 10)));
      expect(line.r2).toBeCloseTo(1, 12);
      expect(line.rse).toBeCloseTo(0, 8);
      const bent = fitCalibration(
        curve((x) => 1 + 2 * x - 0.01 * x * x),
        { model: 'quadratic', weighting }
      );
      expect(bent.coefficients).toEqual([1, 2, -0.01].map((c) => expect.closeTo(c, 9)));
    }
  });

  it('averages response factors as least squares through zero with weights 1/x2, whatever weighting is asked for', () => {
    const points = [
      { x: 1, y: 10 },
      { x: 2, y: 22 },
      { x: 4, y: 36 }
    ];
    const fit = fitCalibration(points, { model: 'average response factor', weighting: 'none' });
    expect(fit).toMatchObject({ coefficients: [10], weighting: '1/x2', r2: null, df: 2, range: [1, 4] });
    expect(fit.residualSd).toBeCloseTo(1, 12);
    expect(fit.standardErrors[0]).toBeCloseTo(1 / Math.sqrt(3), 12);
  });

  it('leaves a level at zero out of the RSE, and out of its count', () => {
    const points = [
      { x: 0, y: 1 },
      { x: 10, y: 21.5 },
      { x: 20, y: 40 },
      { x: 30, y: 62 }
    ];
    const fit = fitCalibration(points, { model: 'linear', weighting: 'none' });
    expect(fit.points[0]!.errorPercent).toBeNull();
    const squares = fit.points.slice(1).reduce((sum, point) => sum + point.errorPercent! ** 2, 0);
    expect(fit.rse).toBeCloseTo(Math.sqrt(squares / 1), 10);
    expect(fit.responseFactorRsd).toBeNull();
    const three = fitCalibration(points.slice(0, 3), { model: 'linear', weighting: 'none' });
    expect(three.rse).toBeNull();
  });

  it('refuses a level at zero where it would be divided by', () => {
    const points = [
      { x: 0, y: 0 },
      { x: 1, y: 1 },
      { x: 2, y: 2 },
      { x: 3, y: 3 }
    ];
    expect(() => fitCalibration(points, { model: 'average response factor', weighting: 'none' })).toThrow(
      /no response factor/
    );
    expect(() => fitCalibration(points, { model: 'linear', weighting: '1/x' })).toThrow(/no weight 1\/x/);
  });

  it('refuses too few points, too few distinct levels, negative levels', () => {
    const options = { model: 'quadratic', weighting: 'none' } as const;
    expect(() =>
      fitCalibration(
        levels.slice(0, 3).map((x) => ({ x, y: x })),
        options
      )
    ).toThrow(/3 calibration points given, at least 4/);
    expect(() =>
      fitCalibration(
        [1, 1, 2, 2].map((x) => ({ x, y: x })),
        options
      )
    ).toThrow(/too few distinct levels/);
    expect(() =>
      fitCalibration(
        [3, 3, 3, 3].map((x) => ({ x, y: x })),
        options
      )
    ).toThrow(/All 4 points sit at the level 3/);
    expect(() =>
      fitCalibration(
        [-1, 1, 2, 3].map((x) => ({ x, y: x })),
        options
      )
    ).toThrow(/point 1 is below zero/);
  });

  it('has no r2 when all responses are equal, and no read-back when the line is flat', () => {
    const fit = fitCalibration(
      curve(() => 5),
      { model: 'linear', weighting: 'none' }
    );
    expect(fit.r2).toBeNull();
    expect(solveCalibration(fit, 7).x).toBeNull();
  });

  const noise = fc.array(fc.integer({ min: -50, max: 50 }), { minLength: 6, maxLength: 6 });

  it('scales with the unit of the responses and of the levels', () => {
    fc.assert(
      fc.property(
        noise,
        fc.constantFrom(...weightings),
        fc.constantFrom('linear' as const, 'quadratic' as const),
        (list, weighting, model) => {
          const points = levels.map((x, i) => ({ x, y: x * (100 + list[i]!) }));
          const a = fitCalibration(points, { model, weighting });
          const b = fitCalibration(
            points.map(({ x, y }) => ({ x: 1000 * x, y: y / 7 })),
            { model, weighting }
          );
          return (
            a.coefficients.every((c, k) => near(b.coefficients[k]!, c / 7 / 1000 ** k, 1e-6 / 1000 ** k)) &&
            near(a.r2, b.r2, 1)
          );
        }
      )
    );
  });

  it('makes weighted residuals orthogonal to the model: the estimates minimise', () => {
    fc.assert(
      fc.property(noise, fc.constantFrom(...weightings), (list, weighting) => {
        const points = levels.map((x, i) => ({ x, y: x * (100 + list[i]!) }));
        const fit = fitCalibration(points, { model: 'quadratic', weighting });
        const weight = (x: number) => (weighting === 'none' ? 1 : weighting === '1/x' ? 1 / x : 1 / (x * x));
        return [0, 1, 2].every((k) => {
          const terms = fit.points.map((point) => weight(point.x) * (point.y - point.fitted) * point.x ** k);
          const size = fit.points.reduce(
            (sum, point) => sum + weight(point.x) * Math.abs(point.y) * point.x ** k,
            0
          );
          return Math.abs(terms.reduce((sum, term) => sum + term, 0)) < 1e-10 * size;
        });
      })
    );
  });
});

suite('solveCalibration', () => {
  const line = fitCalibration(
    curve((x) => 3 + 2 * x + (x === 5 ? 0.4 : 0)),
    { model: 'linear', weighting: '1/x' }
  );
  const bent = fitCalibration(
    curve((x) => 1 + 2 * x - 0.01 * x * x + (x === 5 ? 0.1 : 0)),
    { model: 'quadratic', weighting: 'none' }
  );

  it('reads back what the curve says, inside the range', () => {
    for (const fit of [line, bent]) {
      for (const x of [1.5, 7, 40]) {
        const y = fit.coefficients.reduceRight((sum, c) => sum * x + c, 0);
        const solved = solveCalibration(fit, y);
        expect(solved.x).toBeCloseTo(x, 8);
        expect(solved.outside).toBeNull();
        expect(solved.df).toBe(fit.df);
        expect(solved.se).toBeGreaterThan(0);
      }
    }
  });

  it('reads beyond the range too, and says on which side', () => {
    expect(solveCalibration(line, 203)).toMatchObject({ outside: 'above' });
    expect(solveCalibration(line, 203).x).toBeGreaterThan(50);
    expect(solveCalibration(line, 3.5).outside).toBe('below');
  });

  it('takes the root in range of the two a parabola has', () => {
    const [a, b, c] = bent.coefficients as [number, number, number];
    const solved = solveCalibration(bent, a + 30 * b + 900 * c);
    expect(solved.x).toBeCloseTo(30, 8);
  });

  it('has no level, but a side, for a response the parabola never reaches', () => {
    expect(solveCalibration(bent, 500)).toEqual({ x: null, se: null, df: null, outside: 'above' });
  });

  it('has no error below zero on a weighted curve, where no weight exists', () => {
    const solved = solveCalibration(line, 1);
    expect(solved.x).toBeLessThan(0);
    expect(solved).toMatchObject({ se: null, outside: 'below' });
  });

  it('grows surer with replicates, down to the error of the curve', () => {
    const at = (replicates: number) => solveCalibration(line, 43, { replicates }).se!;
    expect(at(1)).toBeGreaterThan(at(3));
    expect(at(1e12)).toBeGreaterThan(0);
    expect(() => at(0)).toThrow(/at least 1/);
  });
});
