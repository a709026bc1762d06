import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import { netMean, stageLosses, welch } from '../../../src/lib/server/stats/index';
import { near, percent, replicates } from './arbitrary';

const around = (mean: number) => [mean - 1, mean, mean + 1];

suite('stageLosses', () => {
  it('names the stage that loses most in the procedure, where plain differences name another', () => {
    // Step recoveries 0.5, 0.9, 0.6 from the sample down; differences of neighbours are 27, 6 and 40 points.
    const rows = stageLosses([
      { stage: 'evaporation', values: around(60) },
      { stage: 'drying', values: around(54) },
      { stage: 'extraction', values: around(27) }
    ]);
    expect(rows.map((row) => row.stepRecovery.estimate)).toEqual(
      [0.6, 0.9, 0.5].map((y) => expect.closeTo(y, 12))
    );
    expect(rows.map((row) => row.lost!.estimate)).toEqual(
      [18, 5, 50].map((lost) => expect.closeTo(lost, 10))
    );
    expect(rows.map((row) => row.regain)).toEqual([18, 3, 27].map((gain) => expect.closeTo(gain, 10)));
  });

  it('takes a first signal stage as reference only: it loses nothing', () => {
    const [instrument, evaporation] = stageLosses([
      { stage: 'instrument', kind: 'signal', values: around(120) },
      { stage: 'evaporation', values: around(60) }
    ]);
    const none = { estimate: null, se: null, df: null, ci: null };
    expect(instrument).toMatchObject({
      stepRecovery: none,
      lost: null,
      regain: null,
      p: null,
      pAdjusted: null
    });
    expect(instrument!.recovered.estimate).toBe(120);
    expect(evaporation!.stepRecovery.estimate).toBeCloseTo(0.5, 12);
    expect(evaporation!.lost!.estimate).toBeCloseTo(50, 10);
  });

  it('lets the losses add up to what the procedure loses, with or without a signal stage', () => {
    fc.assert(
      fc.property(
        fc.array(replicates(2, 6), { minLength: 1, maxLength: 6 }),
        fc.boolean(),
        (groups, signal) => {
          const rows = stageLosses(
            groups.map((values, i) => ({
              stage: `s${i}`,
              kind: signal && i === 0 ? 'signal' : 'loss',
              values
            }))
          );
          const first = signal ? rows[0]!.recovered.estimate! : 100;
          const last = rows.at(-1)!.recovered.estimate!;
          const sum = rows.reduce((total, row) => total + (row.lost?.estimate ?? 0), 0);
          return near(sum, 100 * (1 - last / first), 1e5);
        }
      )
    );
  });

  it('multiplies step recoveries back to the recovery of the whole procedure', () => {
    fc.assert(
      fc.property(fc.array(replicates(2, 6), { minLength: 1, maxLength: 6 }), (groups) => {
        const rows = stageLosses(groups.map((values, i) => ({ stage: `s${i}`, values })));
        const product = rows.reduce((total, row) => total * row.stepRecovery.estimate!, 100);
        return near(product, rows.at(-1)!.recovered.estimate);
      })
    );
  });

  it('compares neighbours as Welch does and adjusts over the loss stages only', () => {
    const rows = stageLosses([
      { stage: 'instrument', kind: 'signal', values: [101, 99, 100, 103] },
      { stage: 'evaporation', values: [91, 94, 89] },
      { stage: 'extraction', values: [80, 85, 84] }
    ]);
    const p = [welch([101, 99, 100, 103], [91, 94, 89]).p!, welch([91, 94, 89], [80, 85, 84]).p!];
    expect(rows[1]!.p).toBeCloseTo(p[0]!, 14);
    expect(rows[2]!.p).toBeCloseTo(p[1]!, 14);
    expect(Math.min(rows[1]!.pAdjusted!, rows[2]!.pAdjusted!)).toBeCloseTo(2 * Math.min(...p), 14);
  });

  it('counts a matrix effect shared by neighbours once: it cancels in their ratio', () => {
    const shared = { key: 'm', estimate: 80, se: 8, df: 6 };
    const other = { ...shared, key: 'n' };
    const row = (before: typeof shared, own: typeof shared) =>
      stageLosses([
        { stage: 'drying', values: around(60), matrixEffect: before },
        { stage: 'extraction', values: around(40), matrixEffect: own }
      ])[1]!;
    const plain = stageLosses([
      { stage: 'drying', values: around(60) },
      { stage: 'extraction', values: around(40) }
    ])[1]!;
    expect(row(shared, shared).stepRecovery.se).toBeCloseTo(plain.stepRecovery.se!, 12);
    expect(row(shared, other).stepRecovery.se).toBeCloseTo(Math.hypot(plain.stepRecovery.se!, 0.1, 0.1), 12);
    expect(() => row(shared, { ...shared, se: 9 })).toThrow(/matrix effect "m" is given twice/);
  });

  it('gives no ratio for a mean that is not above zero, and keeps its recovery and its p', () => {
    const rows = stageLosses([
      { stage: 'evaporation', values: around(60) },
      { stage: 'extraction', values: [-1, 0.5, -0.5] }
    ]);
    const none = { estimate: null, se: null, df: null, ci: null };
    expect(rows[1]).toMatchObject({ stepRecovery: none, lost: none, regain: null });
    expect(rows[1]!.recovered).toEqual(netMean({ values: [-1, 0.5, -0.5] }));
    expect(rows[1]!.p).toBeLessThan(0.001);
    expect(rows[0]!.lost).toEqual(none);
    expect(rows[0]!.stepRecovery.estimate).toBeCloseTo(0.6, 12);
  });

  it('gives figures without error where a stage has a single replicate, and leaves its p uncounted', () => {
    const rows = stageLosses([
      { stage: 'drying', values: around(90) },
      { stage: 'extraction', values: [50] }
    ]);
    expect(rows[1]!.stepRecovery).toMatchObject({ se: null, ci: null });
    expect(rows[1]!.stepRecovery.estimate).toBeCloseTo(50 / 90, 12);
    expect(rows[1]!.p).toBeNull();
    expect(rows[0]!.pAdjusted).toBe(rows[0]!.p);
    // K is the single replicate, so the loss at the first stage rests on it too.
    expect(rows[0]!.lost!.se).toBeNull();
  });

  it('has no p without any scatter', () => {
    const [row] = stageLosses([{ stage: 'drying', values: [90, 90, 90] }]);
    expect(row!.p).toBeNull();
    expect(row!.stepRecovery.ci).toEqual({ lower: 0.9, upper: 0.9, level: 0.95 });
  });

  it('keeps ratios when every recovery is scaled and a signal stage is the reference', () => {
    fc.assert(
      fc.property(replicates(3, 5), replicates(3, 5), percent, (signal, values, factor) => {
        const rows = (scale: number) =>
          stageLosses([
            { stage: 'instrument', kind: 'signal', values: signal.map((v) => v * scale) },
            { stage: 'extraction', values: values.map((v) => v * scale) }
          ])[1]!;
        return (
          near(rows(1).stepRecovery.estimate, rows(factor).stepRecovery.estimate) &&
          near(rows(1).lost!.se, rows(factor).lost!.se, 1)
        );
      })
    );
  });

  it('refuses a signal stage that is not first, and a stage named twice', () => {
    const values = around(90);
    expect(() =>
      stageLosses([
        { stage: 'a', values },
        { stage: 'b', kind: 'signal', values }
      ])
    ).toThrow(/has to come first/);
    expect(() =>
      stageLosses([
        { stage: 'a', values },
        { stage: 'a', values }
      ])
    ).toThrow(/"a" is given twice/);
    expect(() => stageLosses([])).toThrow(/No stage/);
    expect(() => stageLosses([{ stage: 'drying', values: [NaN] }])).toThrow(/Stage "drying", spiked values/);
  });
});
