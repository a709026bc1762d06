/** A stream of chance that repeats itself exactly for the same seed and name. */
export interface Random {
  /** Uniform in [0, 1). */
  readonly uniform: () => number;
  /** Normal with mean 0 and the standard deviation given. */
  readonly normal: (sd: number) => number;
  /** A factor whose logarithm is normal and whose mean is exactly 1. */
  readonly factor: (sd: number) => number;
}

/** FNV-1a, 32 bits: the stream of one experiment does not move when another is added. */
function hash(text: string): number {
  let value = 0x811c9dc5;
  for (const character of text) value = Math.imul(value ^ (character.codePointAt(0) ?? 0), 0x01000193);
  return value >>> 0;
}

/**
 * Mulberry32 (public domain generator, 32 bits of state), with normal values by Box and Muller (1958).
 * @param stream a name; streams of different names are independent
 */
export function createRandom(seed: number, stream: string): Random {
  let state = (seed ^ hash(stream)) >>> 0;
  const uniform = (): number => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
  const normal = (sd: number): number =>
    sd * Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
  return { uniform, normal, factor: (sd) => Math.exp(normal(sd) - (sd * sd) / 2) };
}
