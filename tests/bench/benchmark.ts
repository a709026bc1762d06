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
  const times: number[] = [];
  for (let run = -warmUps; run < runs; run++) {
    const begun = performance.now();
    await work();
    if (run >= 0) times.push(performance.now() - begun);
  }
  times.sort((a, b) => a - b);
  const middle = Math.floor(times.length / 2);
  return times.length % 2 === 1 ? times[middle]! : (times[middle - 1]! + times[middle]!) / 2;
}
