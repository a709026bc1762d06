import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import {
  assess,
  cellState,
  columnMoments,
  describe,
  massBalance,
  stageLosses,
  studyFigures,
  type ExperimentColumns,
  type StageSample,
  type Value
} from '../../../src/lib/server/stats/index';
import { percent } from './arbitrary';

const criteria = { low: 70, high: 130, rsdMax: 20, nMin: 3 };
const fractions = [
  { name: 'elution', countsAs: 'method' },
  { name: 'rinse', countsAs: 'method' },
  { name: 'effluent', countsAs: 'balance' }
] as const;
const batches = ['a', 'a', 'b', 'b'];
const nativeBatches = ['a', 'b', 'b'];

/** analyte -> portion -> fraction */
type Grid = Value[][][];

function columns(grid: Grid): { portions: number; values: Float64Array; state: Uint8Array } {
  const cells = grid.flat(2);
  return {
    portions: grid[0]!.length,
    values: Float64Array.from(cells, (cell) =>
      cell === null ? 0 : typeof cell === 'number' ? cell : cell.below
    ),
    state: Uint8Array.from(cells, (cell) =>
      cell === null ? cellState.missing : typeof cell === 'number' ? cellState.found : cellState.notDetected
    )
  };
}

const records = (portions: Value[][]) =>
  portions.map((portion) => Object.fromEntries(portion.map((value, i) => [fractions[i]!.name, value])));

const value: fc.Arbitrary<Value> = fc.oneof(
  { weight: 12, arbitrary: percent },
  { weight: 1, arbitrary: fc.constant(null) },
  { weight: 1, arbitrary: percent.map((below) => ({ below })) }
);
const grid = (analytes: number, portions: number): fc.Arbitrary<Grid> => {
  const exactly = (length: number) => ({ minLength: length, maxLength: length });
  return fc.array(fc.array(fc.array(value, exactly(3)), exactly(portions)), exactly(analytes));
};

/** Per-replicate totals of the method fractions as they would be handed to stageLosses; null where none is complete. */
function stageSample(
  { spiked, native }: { readonly spiked: Grid; readonly native: Grid | null },
  analyte: number,
  stage: string
): StageSample | null {
  const totals = (portions: Value[][], inBatches: readonly string[]) => {
    const complete = portions.map((portion, i) => ({ portion: portion.slice(0, 2), batch: inBatches[i]! }));
    const kept = complete.filter(({ portion }) => portion.every((cell) => cell !== null));
    const low = (cell: Value) => (typeof cell === 'number' ? cell : 0);
    return {
      values: kept.map(({ portion }) => portion.reduce<number>((sum, cell) => sum + low(cell), 0)),
      batches: kept.map(({ batch }) => batch)
    };
  };
  const own = totals(spiked[analyte]!, batches);
  if (own.values.length === 0) return null;
  if (native === null) return { stage, values: own.values };
  const off = totals(native[analyte]!, nativeBatches);
  if (off.values.length === 0) return null;
  return { stage, ...own, native: off.values, nativeBatches: off.batches };
}

suite('studyFigures', () => {
  it('gives to the last digit what the functions give one by one, whatever is missing or not detected', () => {
    const experiment = fc.record({ spiked: grid(3, 4), native: fc.option(grid(3, 3)) });
    fc.assert(
      fc.property(fc.array(experiment, { minLength: 1, maxLength: 3 }), (list) => {
        const experiments = list.map(({ spiked, native }, i): ExperimentColumns => ({
          stage: `s${i}`,
          fractions,
          spiked: { ...columns(spiked), batches },
          native: native ? { ...columns(native), batches: nativeBatches } : undefined
        }));
        const figures = studyFigures(experiments, { analytes: 3, criteria });
        figures.forEach(({ balances, verdicts, losses }, analyte) => {
          const single = list.map(({ spiked, native }) =>
            massBalance({
              replicates: records(spiked[analyte]!),
              native: native ? records(native[analyte]!) : undefined,
              fractions,
              batches,
              nativeBatches: native ? nativeBatches : undefined
            })
          );
          // Figures are compared by Object.is: no rounding is allowed for.
          expect(balances).toStrictEqual(single);
          expect(verdicts).toStrictEqual(single.map(({ method }) => method && assess(method, criteria)));
          const samples = list.map((own, i) => stageSample(own, analyte, `s${i}`));
          expect(losses).toStrictEqual(
            samples.every((sample) => sample !== null) ? stageLosses(samples) : null
          );
        });
      }),
      { numRuns: 60 }
    );
  });

  it('walks back over method totals exactly as stageLosses does', () => {
    const dry = [[[50, 40, 3]], [[48, 43, 2]], [[52, 41, 4]]] as Value[][][];
    const extract = [[[30, 20, 3]], [[28, 23, 2]], [[32, 21, 4]]] as Value[][][];
    const stage = (name: string, portions: Value[][][]): ExperimentColumns => ({
      stage: name,
      fractions,
      spiked: columns([portions.flat()])
    });
    const [analyte] = studyFigures([stage('drying', dry), stage('extraction', extract)], { analytes: 1 });
    expect(analyte!.losses).toEqual(
      stageLosses([
        { stage: 'drying', values: [90, 91, 93] },
        { stage: 'extraction', values: [50, 51, 53] }
      ])
    );
    expect(analyte!.verdicts).toEqual([null, null]);
  });

  it('keeps a signal stage as reference', () => {
    const stage = (name: string, kind: 'signal' | 'loss', mean: number): ExperimentColumns => ({
      stage: name,
      kind,
      fractions: [{ name: 'vial', countsAs: 'method' }],
      spiked: columns([[[mean - 1], [mean], [mean + 1]]])
    });
    const [analyte] = studyFigures([stage('instrument', 'signal', 110), stage('drying', 'loss', 99)], {
      analytes: 1
    });
    expect(analyte!.losses![0]!.lost).toBeNull();
    expect(analyte!.losses![1]!.stepRecovery.estimate).toBeCloseTo(0.9, 12);
  });

  it('refuses columns of another size, numbers that are none, unknown states, negative limits', () => {
    const sound = columns([
      [
        [80, 3, 2],
        [81, 4, 2]
      ]
    ]);
    const run = (more: Partial<typeof sound>, analytes = 1) =>
      studyFigures([{ stage: 'drying', fractions, spiked: { ...sound, ...more } }], { analytes });
    expect(() => run({})).not.toThrow();
    expect(() => run({}, 2)).toThrow(/Stage "drying", spiked portions, values: 6 given, 12 expected/);
    expect(() => run({ values: sound.values.map((v, i) => (i === 3 ? NaN : v)) })).toThrow(
      /value 4 must be a finite number/
    );
    expect(() => run({ state: sound.state.map(() => 7) })).toThrow(/cell 1: unknown state 7/);
    expect(() =>
      run({ state: sound.state.map(() => cellState.notDetected), values: sound.values.map((v) => -v) })
    ).toThrow(/the limit is below zero/);
    expect(() => studyFigures([], { analytes: 1 })).toThrow(/No experiment/);
    expect(() => run({}, 0)).toThrow(/Number of analytes/);
  });
});

suite('columnMoments', () => {
  it('gives to the last digit the mean and SD of describe', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 2, max: 6 }),
        fc.array(percent, { minLength: 12, maxLength: 60 }),
        (size, list) => {
          const values = list.slice(0, list.length - (list.length % size));
          const { mean, sd } = columnMoments(Float64Array.from(values), size);
          mean.forEach((own, group) => {
            const d = describe(values.slice(group * size, (group + 1) * size));
            expect([own, sd[group]]).toEqual([d.mean, d.sd]);
          });
        }
      )
    );
  });

  it('refuses single values and columns that do not divide', () => {
    expect(() => columnMoments(Float64Array.of(1, 2), 1)).toThrow(/Groups of 1/);
    expect(() => columnMoments(Float64Array.of(1, 2, 3), 2)).toThrow(/does not divide into groups of 2/);
    expect(() => columnMoments(new Float64Array(), 2)).toThrow(/no value is given/);
    expect(() => columnMoments(Float64Array.of(1, NaN), 2)).toThrow(/finite number/);
  });
});
