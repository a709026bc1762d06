/** What a benchmark may use. */
export interface BenchContext {
  /** An empty server database of the benchmarks' own: its role may create databases. */
  readonly databaseUrl: string;
  /** A new database, migrated, with or without the demo lab; it goes with the server at the end. */
  readonly createDatabase: (options: Readonly<{ demo: boolean }>) => Promise<string>;
  /** A note under the table, for what a number alone does not say. */
  readonly note: (text: string) => void;
}

/** A figure and the floor it is held against, measured in the same run and in the same unit. */
export interface BenchResult {
  readonly figure: number;
  readonly floor: number;
  readonly unit: string;
}

/**
 * One line of the table. Every tests/bench/*.bench.ts exports `benchmarks: readonly Benchmark[]`.
 * The goal is for the ratio of figure to floor; `at most` where less is better, `at least` where more is.
 */
export interface Benchmark {
  readonly name: string;
  readonly goal: Readonly<{ ratio: number; is: 'at most' | 'at least' }>;
  readonly run: (context: BenchContext) => Promise<BenchResult>;
}

/** The median wall time in milliseconds of `work`, after `warmUps` runs that are not counted. */
export async function medianMs(
  work: () => unknown,
  { runs = 7, warmUps = 2 }: Readonly<{ runs?: number; warmUps?: number }> = {}
): Promise<number> {
  const [time = NaN] = await mediansInTurn([work], { runs, warmUps });
  return time;
}

/** The medians of several works that take turns, so that whatever else the machine does falls on all of them alike. */
export async function mediansInTurn(
  works: readonly (() => unknown)[],
  { runs = 7, warmUps = 2 }: Readonly<{ runs?: number; warmUps?: number }> = {}
): Promise<number[]> {
  const times = works.map((): number[] => []);
  for (let run = -warmUps; run < runs; run++) {
    for (const [index, work] of works.entries()) {
      const begun = performance.now();
      await work();
      if (run >= 0) times[index]?.push(performance.now() - begun);
    }
  }
  return times.map(median);
}

/**
 * The median time in milliseconds that `work` itself takes, for goals that are a time and not a ratio. Of each run the lesser of
 * wall and processor time: one grows with what else the machine does, the other with what the collector does beside.
 */
export async function medianOwnMs(
  work: () => unknown,
  { runs = 25, warmUps = 15 }: Readonly<{ runs?: number; warmUps?: number }> = {}
): Promise<number> {
  const times: number[] = [];
  for (let run = -warmUps; run < runs; run++) {
    const [begun, used] = [performance.now(), process.cpuUsage()];
    await work();
    const { user, system } = process.cpuUsage(used);
    if (run >= 0) times.push(Math.min(performance.now() - begun, (user + system) / 1000));
  }
  return median(times);
}

/** NaN of nothing. */
export function median(values: readonly number[]): number {
  const sorted = values.toSorted((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  const [below = NaN, at = NaN] = [sorted[middle - 1], sorted[middle]];
  return sorted.length % 2 === 1 ? at : (below + at) / 2;
}
