/** Half the stream's width, on a slice 0 to 100 across, when all of 100 is still there. */
const fullHalf = 27;
/** Never thinner than this, so that a stream that carries little is still seen. */
const leastHalf = 1.5;

export interface StreamSlice {
  /** The water, and the line of its deepest course; 0 to 100 in both directions. */
  readonly water: string;
  readonly course: string;
  /** Its two banks alone, for a slice whose width is a guess. */
  readonly banks: string;
  /** Middle of the stream at the lower end. */
  readonly mouth: number;
  /** The amount below is not known: the banks are drawn as a guess. */
  readonly guessed: boolean;
}

const half = (amount: number): number =>
  Math.max(leastHalf, (Math.min(Math.max(amount, 0), 120) / 100) * fullHalf);
const round = (value: number): number => Math.round(value * 100) / 100;

/** The middle of the stream at boundary `index`: it swings gently, and comes in and leaves in the middle. */
function course(index: number, boundaries: number): number {
  if (index === 0 || index === boundaries - 1) return 50;
  return 50 + (index % 2 === 1 ? -7 : 7);
}

/**
 * The stream of the ladder in slices, one per reach from the source down, which meet without a kink however high
 * each reach becomes on the page. The width at a boundary is the median amount of 100 that passes it; where that is
 * not known the last known width goes on, and the slice says so.
 *
 * @param remaining what is left of 100 below each reach; null where nothing was measured
 */
export function streamSlices(remaining: readonly (number | null)[]): StreamSlice[] {
  const boundaries = remaining.length + 1;
  let above = 100;
  return remaining.map((amount, index) => {
    const below = amount ?? above;
    const [top, bottom] = [course(index, boundaries), course(index + 1, boundaries)];
    const [wide, narrow] = [half(above), half(below)];
    const bank = (from: number, to: number): string => `C${round(from)} 45 ${round(to)} 55 ${round(to)} 100`;
    const back = (from: number, to: number): string => `C${round(from)} 55 ${round(to)} 45 ${round(to)} 0`;
    const water =
      `M${round(top - wide)} 0${bank(top - wide, bottom - narrow)}` +
      `L${round(bottom + narrow)} 100${back(bottom + narrow, top + wide)}Z`;
    const banks =
      `M${round(top - wide)} 0${bank(top - wide, bottom - narrow)}` +
      `M${round(top + wide)} 0${bank(top + wide, bottom + narrow)}`;
    above = below;
    return { water, banks, course: `M${top} 0${bank(top, bottom)}`, mouth: bottom, guessed: amount === null };
  });
}

/** Where the stream begins: three rills that join and leave the slice as wide as 100. */
export function sourceSlice(): { readonly water: string; readonly courses: readonly string[] } {
  const left = 50 - fullHalf;
  const right = 50 + fullHalf;
  return {
    water:
      `M10 0C10 45 ${left} 55 ${left} 100L${right} 100C${right} 55 90 45 90 0L84 0C84 30 66 38 61 52` +
      `C57 38 53 30 53 0L47 0C47 30 43 38 39 52C34 38 16 30 16 0Z`,
    courses: ['M50 0V100', 'M13 0C13 40 44 45 49.5 86', 'M87 0C87 40 56 45 50.5 86']
  };
}
