import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import {
  cellState,
  columnMoments,
  studyFigures,
  type ExperimentColumns
} from '../../src/lib/server/stats/index';
import {
  medianOwnMs,
  medianMs,
  mediansInTurn,
  type BenchContext,
  type Benchmark,
  type BenchResult
} from './benchmark';

const study = { analytes: 200, stages: 4, portions: 8, fractions: 5 } as const;
const cells = study.analytes * study.portions * study.fractions;

/** Between 0 and 1, the same in every run (Park and Miller). */
function numbers(seed: number): () => number {
  let state = seed;
  return () => (state = (state * 16_807) % 2_147_483_647) / 2_147_483_647;
}

/** 200 analytes at 4 stages, 8 spiked portions, 5 fractions; one cell in 50 is below its limit. */
function columns({ unspiked }: Readonly<{ unspiked: number }>): ExperimentColumns[] {
  const random = numbers(11);
  const portionsOf = (portions: number, scale: number): ExperimentColumns['spiked'] => {
    const size = study.analytes * portions * study.fractions;
    return {
      portions,
      values: Float64Array.from({ length: size }, () => scale * (0.5 + random())),
      state: Uint8Array.from({ length: size }, () =>
        random() < 0.02 ? cellState.notDetected : cellState.found
      )
    };
  };
  return Array.from({ length: study.stages }, (_, stage): ExperimentColumns => ({
    stage: `stage ${stage + 1}`,
    kind: stage === 0 ? 'signal' : 'loss',
    fractions: Array.from({ length: study.fractions }, (_unused, fraction) => ({
      name: `fraction ${fraction + 1}`,
      countsAs: fraction < 2 ? 'method' : 'balance'
    })),
    spiked: portionsOf(study.portions, 20 - stage),
    native: unspiked > 0 ? portionsOf(unspiked, 1) : undefined
  }));
}

async function wholeStudy({ note }: BenchContext): Promise<BenchResult> {
  const criteria = { low: 70, high: 130, rsdMax: 20, nMin: 5 };
  const timeOf = (experiments: readonly ExperimentColumns[]): Promise<number> =>
    medianOwnMs(() => studyFigures(experiments, { analytes: study.analytes, criteria }));
  const figure = await timeOf(columns({ unspiked: 0 }));
  const net = await timeOf(columns({ unspiked: 3 }));
  note(`statistics of the whole study net of three unspiked portions each: ${net.toFixed(0)} ms`);
  return { figure, floor: 25, unit: 'ms' };
}

/** The recoveries of each analyte, stage and fraction, one group of eight behind the other. */
function groups(): Float64Array {
  const random = numbers(7);
  return Float64Array.from({ length: study.stages * cells }, () => 60 + 60 * random());
}

/** Sums and sums of squared deviations and nothing more: no check, no correction, no extremes. */
function plainMoments(values: Float64Array, size: number): { mean: Float64Array; sd: Float64Array } {
  const count = values.length / size;
  const [mean, sd] = [new Float64Array(count), new Float64Array(count)];
  for (let group = 0; group < count; group++) {
    const [start, end] = [group * size, (group + 1) * size];
    let sum = 0;
    for (let at = start; at < end; at++) sum += values[at] ?? 0;
    const middle = sum / size;
    let squares = 0;
    for (let at = start; at < end; at++) squares += ((values[at] ?? 0) - middle) ** 2;
    mean[group] = middle;
    sd[group] = Math.sqrt(squares / (size - 1));
  }
  return { mean, sd };
}

async function momentsOfAll(): Promise<BenchResult> {
  const values = groups();
  const [floor = NaN, figure = NaN] = await mediansInTurn(
    [() => plainMoments(values, study.portions), () => columnMoments(values, study.portions)],
    { runs: 101, warmUps: 50 }
  );
  return { figure, floor, unit: 'ms' };
}

/** What R is asked: the same numbers, grouped, five times; prints the median in ms and the sums of means and SDs. */
const script = `
values <- scan(commandArgs(TRUE)[1], quiet = TRUE)
frame <- data.frame(group = rep(seq_len(length(values) / ${study.portions}), each = ${study.portions}), value = values)
both <- function(v) c(mean(v), sd(v))
times <- sapply(1:5, function(run) system.time(found <<- aggregate(value ~ group, frame, both))[["elapsed"]])
cat(median(times) * 1000, format(colSums(found$value), digits = 15))
`;

async function againstR(): Promise<BenchResult> {
  const values = groups();
  const folder = mkdtempSync(join(tmpdir(), 'headwater-bench-'));
  try {
    const file = join(folder, 'values');
    writeFileSync(file, values.join('\n'));
    const { stdout, stderr, status } = spawnSync('Rscript', ['-e', script, file], { encoding: 'utf8' });
    if (status !== 0) throw new Error(`R could not aggregate:\n${stderr}`);
    const [figure = NaN, ...sums] = stdout.trim().split(/\s+/).map(Number);
    const { mean, sd } = columnMoments(values, study.portions);
    for (const [index, ours] of [mean, sd].entries()) {
      const total = ours.reduce((sum, value) => sum + value, 0);
      if (!(Math.abs(total - (sums[index] ?? NaN)) < 1e-9 * total)) throw new Error('R found other figures');
    }
    const floor = await medianMs(() => columnMoments(values, study.portions), { runs: 51, warmUps: 20 });
    return { figure, floor, unit: 'ms' };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

const haveR = spawnSync('Rscript', ['--version']).status === 0;

export const benchmarks: readonly Benchmark[] = [
  {
    name: 'statistics of a whole study: balances, verdicts, losses of 200 analytes × 4 stages × 8 × 5',
    goal: { ratio: 1, is: 'at most' },
    run: wholeStudy
  },
  {
    name: 'statistics: means and SDs of its 4000 groups, against plain sums',
    goal: { ratio: 3, is: 'at most' },
    run: momentsOfAll
  },
  ...(haveR
    ? [
        {
          name: 'statistics: R aggregate for the same means and SDs, against ours',
          goal: { ratio: 20, is: 'at least' },
          run: againstR
        } as const
      ]
    : [])
];
