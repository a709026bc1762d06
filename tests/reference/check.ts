import { expect, it } from 'vitest';

/** One figure held against a source outside the project. Exactly one of the tolerances is given. */
export type Check = {
  readonly what: string;
  readonly source: string;
  readonly actual: () => number | null;
  readonly expected: number;
  readonly relative?: number;
  readonly absolute?: number;
};

/** Registers one test per check; the title names the source and the tolerance. */
export function verify(checks: readonly Check[]): void {
  for (const { what, source, actual, expected, relative, absolute } of checks) {
    const allowed = absolute ?? (relative ?? 0) * Math.abs(expected);
    const tolerance = absolute === undefined ? `relative ${relative}` : `absolute ${absolute}`;
    it(`${what} is ${expected} (${source}; ${tolerance})`, () => {
      const figure = actual();
      expect(figure).not.toBeNull();
      const off = Math.abs(figure! - expected);
      expect(off, `${figure} is ${off} away from ${expected}`).toBeLessThanOrEqual(allowed);
    });
  }
}
