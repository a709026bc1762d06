/**
 * The last place, coming from `inside`, at which a claim still holds, when it holds at `inside`, fails at `outside` and changes
 * once between them. Halves down to neighbouring doubles.
 * @returns a place where the claim holds
 */
export function lastWhere(holds: (place: number) => boolean, inside: number, outside: number): number {
  let good = inside;
  let bad = outside;
  for (let step = 0; step < 1200; step += 1) {
    const middle = good + (bad - good) / 2;
    if (middle === good || middle === bad) break;
    if (holds(middle)) good = middle;
    else bad = middle;
  }
  return good;
}
