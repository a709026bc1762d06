import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import * as stats from '../../../src/lib/server/stats/index';
import { near, replicates, shuffled } from './arbitrary';

/*
 * What shifting, scaling and reordering must do to each figure. Shifts are whole and factors moderate, so that rounding stays far
 * below the tolerances.
 */
const shift = fc.integer({ min: -500, max: 500 });
const factor = fc.integer({ min: 1, max: 400 }).map((value) => value / 20);
const moved = (values: readonly number[], by: number) => values.map((value) => value + by);
const scaled = (values: readonly number[], by: number) => values.map((value) => value * by);
const groups = fc.array(replicates(2, 6), { minLength: 2, maxLength: 5 });

/** Scatter that is not a matter of rounding: without it t, F and q hang on the last digit. */
const scatters = (...lists: readonly (readonly number[])[]) =>
  lists.every((list) => Math.max(...list) - Math.min(...list) > 0.5);

suite('comparisons', () => {
  it('do not see a common shift, and follow a common factor', () => {
    fc.assert(
      fc.property(replicates(), replicates(), shift, factor, (a, b, by, times) => {
        fc.pre(scatters(a, b));
        const plain = stats.welch(a, b);
        const shifted = stats.welch(moved(a, by), moved(b, by));
        const larger = stats.welch(scaled(a, times), scaled(b, times));
        return (
          near(shifted.difference, plain.difference, 1e3) &&
          near(shifted.p, plain.p, 1, 1e-7) &&
          near(larger.difference, plain.difference * times, 1e3) &&
          near(larger.t, plain.t, 1, 1e-7) &&
          near(larger.ci!.upper, plain.ci!.upper * times, 1e3)
        );
      })
    );
  });

  it('of one sample move with the value they are held against', () => {
    fc.assert(
      fc.property(replicates(), shift, (values, by) => {
        fc.pre(scatters(values));
        const plain = stats.oneSampleT(values, 100);
        const shifted = stats.oneSampleT(moved(values, by), 100 + by);
        return near(shifted.t, plain.t, 1, 1e-7) && near(shifted.ci!.lower, plain.ci!.lower, 1e3);
      })
    );
  });

  it('of equivalence keep their verdict when values and margin are scaled, and when the groups change places', () => {
    fc.assert(
      fc.property(replicates(), replicates(), factor, shift, (a, b, times, by) => {
        fc.pre(scatters(a, b));
        const plain = stats.tost(a, b, 15);
        const larger = stats.tost(scaled(moved(a, by), times), scaled(moved(b, by), times), 15 * times);
        const turned = stats.tost(b, a, 15);
        fc.pre(Math.abs(plain.p! - 0.05) > 1e-6);
        return (
          near(larger.p, plain.p, 1, 1e-7) &&
          larger.equivalent === plain.equivalent &&
          near(turned.pLower, plain.pUpper, 1, 1e-9) &&
          turned.equivalent === plain.equivalent
        );
      })
    );
  });
});

suite('analysis of variance', () => {
  it('does not see a shift, a factor or the order of groups and values', () => {
    fc.assert(
      fc.property(groups, shift, factor, (list, by, times) => {
        fc.pre(scatters(...list));
        const plain = stats.oneWayAnova(list);
        const other = stats.oneWayAnova(list.toReversed().map((g) => scaled(moved(g, by), times).reverse()));
        return (
          near(other.f, plain.f, 1e-3, 1e-6) &&
          near(other.within.ss, plain.within.ss * times * times, 1, 1e-6) &&
          other.between.df === plain.between.df
        );
      })
    );
  });

  it('splits precision whatever the unit or the order, and leaves its SDs where all values move alike', () => {
    fc.assert(
      fc.property(groups, shift, factor, (list, by, times) => {
        fc.pre(scatters(...list));
        const plain = stats.precisionComponents(list);
        const shifted = stats.precisionComponents(list.map((group) => moved(group, by)));
        const larger = stats.precisionComponents(list.toReversed().map((group) => scaled(group, times)));
        return (
          near(shifted.repeatabilitySd, plain.repeatabilitySd, 10, 1e-7) &&
          near(shifted.intermediateSd, plain.intermediateSd, 10, 1e-7) &&
          near(larger.repeatabilitySd, plain.repeatabilitySd * times, 10, 1e-7) &&
          near(larger.repeatabilityRsd, plain.repeatabilityRsd, 10, 1e-7) &&
          near(larger.mean, plain.mean * times, 10)
        );
      })
    );
  });

  it('compares pairs whatever the shift, and turns a difference round with its groups', () => {
    fc.assert(
      fc.property(replicates(2, 5), replicates(2, 5), replicates(2, 5), shift, (a, b, c, by) => {
        fc.pre(scatters(a, b, c));
        const plain = stats.tukeyKramer([a, b, c]);
        const shifted = stats.tukeyKramer([a, b, c].map((group) => moved(group, by)));
        const turned = stats.tukeyKramer([b, a, c]);
        return (
          plain.every((pair, i) => near(shifted[i]!.p, pair.p, 1, 1e-6)) &&
          near(turned[0]!.difference, -plain[0]!.difference, 1e3) &&
          near(turned[0]!.ci.lower, -plain[0]!.ci.upper, 1e3, 1e-7) &&
          near(turned[1]!.p, plain[2]!.p, 1, 1e-6)
        );
      }),
      { numRuns: 15 }
    );
  });

  it('refuses an empty group wherever it stands', () => {
    fc.assert(
      fc.property(groups, fc.nat(), (list, place) => {
        const holed = list.toSpliced(place % (list.length + 1), 0, []);
        for (const call of [stats.oneWayAnova, stats.tukeyKramer, stats.brownForsythe, stats.cochran]) {
          expect(() => call(holed)).toThrow(expect.objectContaining({ code: 'empty-group' }));
        }
        expect(() => stats.precisionComponents(holed)).toThrow(
          expect.objectContaining({ code: 'empty-group' })
        );
      }),
      { numRuns: 30 }
    );
  });
});

suite('recoveries', () => {
  it('net of native values do not depend on the order of either', () => {
    fc.assert(
      fc.property(shuffled(replicates()), shuffled(replicates()), ([values, other], [native, turned]) => {
        const plain = stats.netMean({ values, native });
        const mixed = stats.netMean({ values: other, native: turned });
        return near(mixed.estimate, plain.estimate, 1e3) && near(mixed.se, plain.se, 1e3);
      })
    );
  });

  it('net of native values follow a common factor', () => {
    fc.assert(
      fc.property(replicates(), replicates(), factor, (values, native, times) => {
        const plain = stats.netMean({ values, native });
        const larger = stats.netMean({ values: scaled(values, times), native: scaled(native, times) });
        return near(larger.estimate, plain.estimate! * times, 1e3) && near(larger.se, plain.se! * times, 1e3);
      })
    );
  });

  it('of a mass balance follow a common factor, and keep their shares', () => {
    const fractions = ['elution', 'rinse'].map((name) => ({ name, countsAs: 'method' as const }));
    fc.assert(
      fc.property(replicates(3, 6), factor, (values, times) => {
        const at = (scale: number) =>
          stats.massBalance({
            replicates: values.map((value) => ({ elution: value * scale, rinse: { below: scale } })),
            fractions
          });
        const [plain, larger] = [at(1), at(times)];
        return (
          near(larger.method!.mean, plain.method!.mean * times, 1e3) &&
          near(larger.method!.high, plain.method!.high * times, 1e3) &&
          near(larger.fractions[0]!.share, plain.fractions[0]!.share, 1)
        );
      })
    );
  });

  it('that are open do not depend on the order of replicates or fractions, nor on a fraction without anything', () => {
    fc.assert(
      fc.property(shuffled(replicates(3, 6)), ([values, other]) => {
        const input = {
          fractions: [
            { name: 'elution', passed: ['drying'] },
            { name: 'effluent', passed: [] }
          ],
          stepRecoveries: { drying: { estimate: 0.8, se: 0.04, df: 5, ci: null } }
        };
        const record = (value: number) => ({ elution: value, effluent: 5 });
        const plain = stats.openLoss({ ...input, replicates: values.map(record) });
        const mixed = stats.openLoss({
          ...input,
          fractions: [...input.fractions.toReversed(), { name: 'rinse', passed: ['drying'] }],
          replicates: other.map((value) => ({ ...record(value), rinse: 0 }))
        });
        return (
          near(mixed.open.estimate, plain.open.estimate, 1e3) &&
          near(mixed.open.se, plain.open.se, 1e3, 1e-8) &&
          near(mixed.downstream.estimate, plain.downstream.estimate, 1e3)
        );
      })
    );
  });

  it('by stage do not depend on the order of replicates, and a stage without any is refused', () => {
    fc.assert(
      fc.property(shuffled(replicates(2, 6)), replicates(2, 6), ([values, other], before) => {
        const rows = (list: readonly number[]) =>
          stats.stageLosses([
            { stage: 'drying', values: before },
            { stage: 'extraction', values: list }
          ]);
        const [plain, mixed] = [rows(values)[1]!, rows(other)[1]!];
        expect(() => rows([])).toThrow(expect.objectContaining({ code: 'empty-group' }));
        return (
          near(mixed.lost!.estimate, plain.lost!.estimate, 1e3) &&
          near(mixed.stepRecovery.se, plain.stepRecovery.se, 1, 1e-7)
        );
      })
    );
  });

  it('forecast do not depend on the order of the steps, and follow a factor on one of them', () => {
    fc.assert(
      fc.property(replicates(), replicates(), replicates(), factor, (first, second, third, times) => {
        const [a, b, c] = [first, second, third].map((values, i) => ({ key: `m${i}`, values }));
        const steps = [
          { to: b!, from: a! },
          { to: c!, from: null }
        ];
        const plain = stats.forecastRecovery(steps);
        const turned = stats.forecastRecovery(steps.toReversed());
        const larger = stats.forecastRecovery([
          steps[0]!,
          { to: { key: 'm2', values: scaled(third, times) }, from: null }
        ]);
        return (
          near(turned.estimate, plain.estimate) &&
          near(turned.se, plain.se, 1) &&
          near(larger.estimate, plain.estimate! * times) &&
          near(larger.se, plain.se, 1, 1e-7)
        );
      })
    );
  });
});

suite('matrix effects', () => {
  it('do not depend on the unit of the responses or the order they came in', () => {
    fc.assert(
      fc.property(
        shuffled(replicates()),
        replicates(),
        replicates(),
        factor,
        ([neat, other], post, pre, times) => {
          const plain = stats.matrixEffect({ neat, postSpiked: post, preSpiked: pre });
          const larger = stats.matrixEffect({
            neat: scaled(other, times),
            postSpiked: scaled(post, times),
            preSpiked: scaled(pre, times).reverse()
          });
          return (['matrixEffect', 'recovery', 'processEfficiency'] as const).every(
            (name) =>
              near(larger[name].estimate, plain[name].estimate) &&
              near(larger[name].se, plain[name].se, 1, 1e-7)
          );
        }
      )
    );
  });

  it('do not see a background that all extracts share when it is taken off', () => {
    fc.assert(
      fc.property(
        replicates(),
        replicates(),
        replicates(),
        fc.integer({ min: 1, max: 300 }),
        (neat, post, pre, by) => {
          const plain = stats.matrixEffect({ neat, postSpiked: post, preSpiked: pre, native: [0, 0] });
          const raised = stats.matrixEffect({
            neat,
            postSpiked: moved(post, by),
            preSpiked: moved(pre, by),
            native: [by, by]
          });
          return near(raised.matrixEffect.estimate, plain.matrixEffect.estimate, 1e3);
        }
      )
    );
  });
});

suite('calibration', () => {
  it('does not depend on the order of its points, and reads a level back in any unit', () => {
    const levels = [1, 2, 5, 10, 20, 50];
    const noise = fc.array(fc.integer({ min: -30, max: 30 }), { minLength: 6, maxLength: 6 });
    const model = fc.constantFrom(
      'average response factor' as const,
      'linear' as const,
      'quadratic' as const
    );
    fc.assert(
      fc.property(
        noise,
        model,
        fc.constantFrom('none' as const, '1/x' as const, '1/x2' as const),
        factor,
        (list, name, weighting, times) => {
          const points = levels.map((x, i) => ({ x, y: x * (1000 + list[i]!) }));
          const options = { model: name, weighting };
          const plain = stats.fitCalibration(points, options);
          const turned = stats.fitCalibration(points.toReversed(), options);
          const rescaled = stats.fitCalibration(
            points.map(({ x, y }) => ({ x: x * times, y: y * 3 })),
            options
          );
          const [level, again] = [
            stats.solveCalibration(plain, 9000),
            stats.solveCalibration(rescaled, 27000)
          ];
          return (
            turned.coefficients.every((c, k) => near(c, plain.coefficients[k]!, 1, 1e-8)) &&
            near(turned.rse, plain.rse, 1, 1e-8) &&
            near(again.x, level.x! * times, 1, 1e-8) &&
            near(again.se, level.se! * times, 1e-2, 1e-6)
          );
        }
      )
    );
  });
});
