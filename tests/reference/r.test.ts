import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import quadrature from './r/quadrature.json';
import recorded from './r/reference.json';
import { figuresAgainstR } from './r-figures';
import { tailsAgainstQuadrature } from './r-tails';

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

describe('tails by Gauss-Legendre quadrature (values recorded from R 4.2.2 by r/quadrature.R)', () => {
  const tails = tailsAgainstQuadrature();

  it('covers the same names on both sides', () => {
    expect([...tails.keys()].sort()).toEqual(Object.keys(quadrature).sort());
  });

  it.each(Object.entries(quadrature))(
    '%s is %s (absolute 1e-12, relative 1e-9 down to 1e-12)',
    (name, expected) => {
      const off = Math.abs(tails.get(name)! - expected);
      expect(off).toBeLessThan(1e-12);
      if (expected > 1e-12) expect(off / expected).toBeLessThan(1e-9);
    }
  );
});

describe('R itself', () => {
  it.skipIf(!hasR).each([
    ['reference', recorded, 0],
    ['quadrature', quadrature, 1e-14]
  ] as const)(
    'gives the recorded values of r/%s.R when run now (skipped without R)',
    (name, values: Readonly<Record<string, number>>, absolute) => {
      const script = fileURLToPath(new URL(`./r/${name}.R`, import.meta.url));
      const run = spawnSync('Rscript', ['--vanilla', script], { encoding: 'utf8' });
      expect(run.status, run.stderr).toBe(0);
      const live = JSON.parse(run.stdout) as Record<string, number>;
      expect(Object.keys(live).sort()).toEqual(Object.keys(values).sort());
      const strays = Object.entries(values).filter(
        ([figure, value]) => Math.abs(live[figure]! - value) > absolute && !agree(live[figure]!, value, 1e-8)
      );
      expect(strays).toEqual([]);
    },
    120_000
  );
});
