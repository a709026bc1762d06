import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import {
  coefficientTests,
  curveBand,
  fitCalibration,
  runsOneWay,
  StatsError
} from '../../src/lib/server/stats/index';
import recorded from './r/calibration-bands.json';

/* Levels, responses and places of the bands as in r/calibration-bands.R. */
const x = [0.5, 1, 2, 5, 5, 20, 50, 100, 100, 200];
const y = [0.0118, 0.0209, 0.0432, 0.1031, 0.1066, 0.4123, 1.0171, 1.978, 2.021, 3.861];
const at = [0.5, 3, 40, 150, 200];
const points = x.map((level, index) => ({ x: level, y: y[index]! }));
const script = fileURLToPath(new URL('./r/calibration-bands.R', import.meta.url));
const hasR = spawnSync('Rscript', ['--version']).status === 0;

function figures(): ReadonlyMap<string, number> {
  const found = new Map<string, number>();
  const put = (name: string, values: readonly number[]) =>
    values.forEach((value, index) => found.set(`${name}.${index + 1}`, value));
  for (const model of ['linear', 'quadratic', 'average response factor'] as const) {
    for (const weighting of model === 'average response factor'
      ? (['none'] as const)
      : (['none', '1/x', '1/x2'] as const)) {
      const fit = fitCalibration(points, { model, weighting });
      const name = model === 'average response factor' ? model : `${model} ${weighting}`;
      for (const level of [0.95, 0.99]) {
        const band = curveBand(fit, at, level);
        put(
          `${name} height`,
          band.map(({ height }) => height)
        );
        put(
          `${name} confidence lower ${level}`,
          band.map(({ confidence }) => confidence.lower)
        );
        put(
          `${name} confidence upper ${level}`,
          band.map(({ confidence }) => confidence.upper)
        );
        put(
          `${name} prediction lower ${level}`,
          band.map(({ prediction }) => prediction!.lower)
        );
        put(
          `${name} prediction upper ${level}`,
          band.map(({ prediction }) => prediction!.upper)
        );
      }
      if (model !== 'average response factor')
        put(
          `${name} p of coefficients`,
          coefficientTests(fit).map((p) => p!)
        );
    }
  }
  return found;
}

describe('bands of a curve (values recorded from R 4.2.2: predict of lm, summary of lm)', () => {
  const ours = figures();
  const names = Object.keys(recorded) as (keyof typeof recorded)[];

  it('cover the same names on both sides', () => {
    expect([...ours.keys()].sort()).toEqual([...names].sort());
  });

  it.each(names)('%s', (name) => {
    // R inverts its cross products once more than is needed, so its small p agree in nine digits only.
    const relative = name.includes(' p of ') ? 1e-8 : 1e-10;
    expect(Math.abs(ours.get(name)! - recorded[name])).toBeLessThanOrEqual(
      relative * Math.abs(recorded[name]) + 1e-14
    );
  });

  it.skipIf(!hasR)('R gives the recorded values when run now (skipped without R)', () => {
    const run = spawnSync('Rscript', ['--vanilla', script], { encoding: 'utf8' });
    expect(run.status, run.stderr).toBe(0);
    const live = JSON.parse(run.stdout) as Record<string, number>;
    expect(Object.keys(live).sort()).toEqual([...names].sort());
    for (const name of names) expect(live[name]).toBeCloseTo(recorded[name], 9);
  });
});

describe('what a band refuses and leaves out', () => {
  const fit = fitCalibration(points, { model: 'linear', weighting: '1/x' });

  it('has no prediction where a weighted curve has no weight', () => {
    expect(curveBand(fit, [0])[0]).toMatchObject({ x: 0, height: fit.coefficients[0], prediction: null });
  });

  it.each([[[NaN], 0.95] as const, [[1], 1] as const, [[1], 0] as const, [[Infinity], 0.5] as const])(
    'throws for levels %j at %s',
    (xs, level) => {
      expect(() => curveBand(fit, xs, level)).toThrow(StatsError);
    }
  );
});

describe('a curve that turns', () => {
  // By hand: y = 10 x - x^2 has the slope 10 - 2 x, which changes its sign at x = 5.
  const parabola = (xs: readonly number[]) =>
    fitCalibration(
      xs.map((level) => ({ x: level, y: 10 * level - level * level })),
      { model: 'quadratic', weighting: 'none' }
    );

  it('runs one way only while its top lies beyond the range', () => {
    expect(runsOneWay(parabola([1, 2, 3, 4]))).toBe(true);
    expect(runsOneWay(parabola([1, 2, 4, 6]))).toBe(false);
    expect(runsOneWay(parabola([6, 7, 8, 9]))).toBe(true);
  });
});
