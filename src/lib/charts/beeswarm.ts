export interface Dot<T> {
  readonly item: T;
  /** Pixels from the left and from the middle line. */
  readonly x: number;
  readonly y: number;
}

/**
 * Dots beside each other on a line: each keeps its place along the line and moves as little as it can off it, so that
 * none hides another. Where the strip is too low for the crowd, dots overlap at its edge rather than leave it.
 *
 * @param radius of a dot, in pixels; @param reach how far from the middle line a dot's centre may go
 */
export function beeswarm<T>(
  items: readonly T[],
  position: (item: T) => number,
  radius: number,
  reach: number
): Dot<T>[] {
  const apart = radius * 2;
  const placed: Dot<T>[] = [];
  const sorted = items.map((item) => ({ item, x: position(item) })).sort((a, b) => a.x - b.x);
  for (const { item, x } of sorted) {
    const near = placed.filter((dot) => x - dot.x < apart);
    const free = (y: number): boolean =>
      near.every((dot) => (dot.x - x) ** 2 + (dot.y - y) ** 2 >= apart ** 2 - 1e-6);
    // A free place touches a neighbour or is the middle line itself.
    const candidates = [
      0,
      ...near.flatMap((dot) => {
        const rise = Math.sqrt(Math.max(0, apart ** 2 - (x - dot.x) ** 2));
        return [dot.y - rise, dot.y + rise];
      })
    ]
      .filter((y) => Math.abs(y) <= reach)
      .sort((a, b) => Math.abs(a) - Math.abs(b) || a - b);
    const y = candidates.find(free) ?? (placed.length % 2 === 0 ? reach : -reach);
    placed.push({ item, x, y });
  }
  return placed;
}
