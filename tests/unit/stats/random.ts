/** Reproducible random numbers: mulberry32 (T. Ettinger, public domain) for the uniform, Box and Muller for the normal. */
export function normalSource(seed: number): (mean: number, sd: number) => number {
  let state = seed >>> 0;
  const uniform = () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  return (mean, sd) => {
    const radius = Math.sqrt(-2 * Math.log(1 - uniform()));
    return mean + sd * radius * Math.cos(2 * Math.PI * uniform());
  };
}
