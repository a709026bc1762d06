import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import recorded from './r/reference.json';
import { figuresAgainstR } from './r-figures';

const script = fileURLToPath(new URL('./r/reference.R', import.meta.url));
const hasR = spawnSync('Rscript', ['--version']).status === 0;

/** What differs from R by more than rounding, and why. */
const tolerances: readonly (readonly [name: RegExp, relative: number])[] = [
  // R's ptukey is good to about 1e-10 in absolute terms, so a p of 1.8e-7 agrees in its first digits only.
  [/^tukey InsectSprays D-B.4/, 1e-4],
  [/^(ptukey|tukey)/, 2e-8],
  // R sums a Poisson mixture to an absolute error of about 1e-12.
  [/^(pt noncentral|power)/, 1e-9],
  // Variances by numeric derivatives on R's side.
  [/^(netMean matrix|step recovery|lost|forecast|openLoss|matrixEffect|calibration .* (solve|rse))/, 1e-7],
  // Differences of nearly equal sums of squares on R's side.
  [/^(typeII|npk|warpbreaks)/, 1e-10]
];

function tolerance(name: string): number {
  return tolerances.find(([pattern]) => pattern.test(name))?.[1] ?? 1e-11;
}

function agree(actual: number, expected: number, relative: number): boolean {
  return Math.abs(actual - expected) <= relative * Math.abs(expected) + 1e-15;
}

describe('figures that R computes too (values recorded from R 4.2.2 by r/reference.R)', () => {
  const figures = figuresAgainstR();
  const names = Object.keys(recorded) as (keyof typeof recorded)[];

  it('covers the same names on both sides', () => {
    expect([...figures.keys()].sort()).toEqual([...names].sort());
  });

  it.each(names)('%s', (name) => {
    const actual = figures.get(name);
    const expected = recorded[name];
    const relative = tolerance(name);
    expect(actual).not.toBeNull();
    expect(agree(actual!, expected, relative), `${actual} against ${expected} within ${relative}`).toBe(true);
  });
});

describe('R itself', () => {
  it.skipIf(!hasR)('gives the recorded values when run now (skipped without R)', () => {
    const run = spawnSync('Rscript', ['--vanilla', script], { encoding: 'utf8' });
    expect(run.status, run.stderr).toBe(0);
    const live = JSON.parse(run.stdout) as Record<string, number>;
    expect(Object.keys(live).sort()).toEqual(Object.keys(recorded).sort());
    const strays = Object.entries(recorded).filter(([name, value]) => !agree(live[name]!, value, 1e-8));
    expect(strays).toEqual([]);
  });
});
