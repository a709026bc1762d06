import { beforeAll, describe, expect, it } from 'vitest';
import { demoLabName } from '../../seeders/demo-accounts';
import { demoExperiments, spikeNg } from '../../seeders/demo/experiments';
import { createDemoLab } from '../../seeders/demo/labs';
import { demoAnalyte, demoPanel } from '../../seeders/demo/panel';
import { demoStudyCode, seedDemoStudy } from '../../seeders/demo/study';
import {
  extractionSplit,
  methodFractions,
  signalLeft,
  truth,
  variantCodes,
  type Truth,
  type VariantCode
} from '../../seeders/demo/truth';
import { findStudy, readStudy } from '../../src/lib/server/services/figures/read-study';
import {
  studyFigures,
  type StudyFigures,
  type VariantContext
} from '../../src/lib/server/services/figures/study-figures';
import { benjaminiHochberg } from '../../src/lib/server/stats';
import { studentTwoSided } from '../../src/lib/server/stats/distributions';

/*
 * The demo's data come from a generator whose truth is known. What the program finds has to agree with it within the sampling
 * error: each figure within four of its standard errors, and of a family of figures none significantly off by Benjamini and
 * Hochberg at 1 %. To a standard error comes what does not show in the scatter of portions: calibration lines read from seven
 * levels of about 1.4 % each, and the days of a batch (0.5 % each).
 */
const sharedError = 0.011;

let figures: StudyFigures;
const truths = truth();

function trueOf(name: string, variant: VariantCode): Truth {
  const found = truths.find((item) => item.analyte.name === name && item.variant === variant);
  if (!found) throw new Error(`no truth for ${name} by ${variant}`);
  return found;
}

function contextOf(code: VariantCode): VariantContext {
  const variant = figures.data.variants.find((item) => item.code === code);
  if (!variant) throw new Error(`no variant ${code}`);
  return figures.variant(variant);
}

const topOf = (code: VariantCode) => {
  const { top } = contextOf(code);
  if (!top) throw new Error(`no experiment stands for the extraction of ${code}`);
  return top;
};

const entryNamed = (name: string) => {
  const entry = figures.data.panel.find((item) => item.name === name);
  if (!entry) throw new Error(`no ${name} on the panel`);
  return entry;
};

const targets = demoPanel.filter(({ role }) => role === 'target').map(({ name }) => name);

/** One figure beside its truth; `allowance` widens the comparison where not detected leaves room. */
interface Comparison {
  readonly what: string;
  readonly found: number;
  readonly expected: number;
  readonly se: number;
  readonly df: number;
  readonly allowance: number;
}

const distance = ({ found, expected, allowance }: Comparison) =>
  Math.max(0, Math.abs(found - expected) - allowance);

function expectAgreement(comparisons: readonly Comparison[]): void {
  const off = comparisons.filter((one) => distance(one) > 4 * one.se);
  expect(off).toEqual([]);
  const p = comparisons.map((one) => studentTwoSided(distance(one) / one.se, one.df));
  const adjusted = benjaminiHochberg(p);
  const significant = comparisons.filter((_, index) => (adjusted[index] ?? 1) < 0.01);
  expect(significant).toEqual([]);
  // Standard errors that were far too wide would let anything pass.
  const squares = comparisons.map((one) => ((one.found - one.expected) / one.se) ** 2);
  const typical = Math.sqrt(squares.toSorted((a, b) => a - b)[Math.floor(squares.length / 2)] ?? 0);
  expect(typical).toBeGreaterThan(0.3);
}

const withShared = (se: number, ...parts: readonly number[]) =>
  Math.hypot(se, ...parts.map((part) => sharedError * part));

beforeAll(async () => {
  const lab = await createDemoLab(demoLabName);
  await seedDemoStudy(lab);
  const study = await findStudy(lab.labId, demoStudyCode);
  if (!study) throw new Error('the demo study was not seeded');
  figures = studyFigures(await readStudy(lab.labId, study.id));
});

describe("the program's figures beside the demo's truth", () => {
  it('finds the method recovery of every target by every variant', () => {
    const comparisons = variantCodes.flatMap((code) =>
      targets.flatMap((name): Comparison[] => {
        const entry = figures.entry(topOf(code).id, entryNamed(name).id);
        if (!entry.ready) throw new Error(entry.reason);
        const { method } = entry.balance;
        const { signal, method: share } = trueOf(name, code);
        const expected = 100 * signal * share * signalLeft(demoAnalyte(name), code);
        if (!method || method.se === null) throw new Error(`no method recovery of ${name} by ${code}`);
        const native = entry.input.subtracted?.meanPercent ?? 0;
        return [
          {
            what: `${name} by ${code}`,
            found: method.mean,
            expected,
            se: withShared(Math.max(method.se, 0.05), method.mean, native),
            df: method.df ?? entry.input.counted.length - 1,
            allowance: Math.max(
              0,
              ...[entry.ends?.high, entry.ends?.low].map((end) =>
                Math.abs((end ?? method.mean) - method.mean)
              )
            )
          }
        ];
      })
    );
    expect(comparisons).toHaveLength(4 * targets.length);
    expectAgreement(comparisons);
  });

  it('finds what each stage takes of 100 in the sample', () => {
    const comparisons = variantCodes.flatMap((code) => {
      const { figures: ofVariant } = contextOf(code);
      return targets.flatMap((name): Comparison[] => {
        const { steps } = trueOf(name, code);
        const expected: Readonly<Record<string, number>> = {
          extraction: 100 * (1 - steps.extraction),
          drying: 100 * steps.extraction * (1 - steps.drying),
          concentration: 100 * steps.extraction * steps.drying * (1 - steps.concentration)
        };
        return (ofVariant.entries.get(entryNamed(name).id)?.rows ?? []).flatMap(
          ({ stage, lost, recovered }) => {
            if (lost?.estimate == null || lost.se === null) return [];
            const se = withShared(lost.se, recovered.estimate ?? 0, 100 - (expected.extraction ?? 0));
            return [
              {
                what: `${stage} of ${name} by ${code}`,
                found: lost.estimate,
                expected: expected[stage] ?? Number.NaN,
                se,
                df: lost.df ?? 4,
                allowance: 0.6
              }
            ];
          }
        );
      });
    });
    // Where nothing at all comes through, there is no step to be told apart.
    expect(comparisons.length).toBeGreaterThan(220);
    expectAgreement(comparisons);
  });

  it('finds the native amount of the intake water and what the lab adds to it, as far as they reach the extract', () => {
    const comparisons = variantCodes.flatMap((code) =>
      targets.map((name): Comparison => {
        const entry = figures.entry(topOf(code).id, entryNamed(name).id);
        if (!entry.ready || !entry.input.subtracted) throw new Error(`nothing is subtracted from ${name}`);
        const { fractions, spikeNg: spike, subtracted } = entry.input;
        const counting = fractions.filter(({ countsAs }) => countsAs === 'method');
        const values = subtracted.native.flatMap((record) => counting.map(({ id }) => record[id] ?? null));
        const ofValues = (read: (value: (typeof values)[number]) => number) =>
          (values.reduce<number>((sum, value) => sum + read(value), 0) / subtracted.native.length) *
          (spike / 100);
        const found = ofValues((value) => (typeof value === 'number' ? value : 0));
        const allowance = ofValues((value) =>
          typeof value === 'object' && value !== null ? value.below : 0
        );
        const { nativeNg, fractions: shares } = trueOf(name, code);
        const inSample = nativeNg + demoAnalyte(name).contaminationNg;
        const reaching = counting.reduce((sum, fraction) => sum + (shares[fraction.name] ?? 0), 0);
        const expected = inSample * reaching * signalLeft(demoAnalyte(name), code);
        // Scatter of one unspiked portion: volumes and hands, the substance's own, and the steps'.
        const sd = expected * Math.hypot(0.022, 0.032 * demoAnalyte(name).unrest, 0.03);
        const se = withShared(Math.max(sd / Math.sqrt(subtracted.native.length), 0.02), found);
        return { what: `${name} by ${code}`, found, expected, se, df: 60, allowance };
      })
    );
    expectAgreement(comparisons);
  });

  it('finds what is open: what the extraction keeps and nobody collects', () => {
    const comparisons = (['B', 'C', 'D'] as const).flatMap((code) =>
      targets.flatMap((name): Comparison[] => {
        const open = contextOf(code).figures.entries.get(entryNamed(name).id)?.open;
        if (!open?.available || open.open.estimate === null || open.open.se === null) return [];
        const { collected, lost } = extractionSplit(demoAnalyte(name), code);
        // What is masked at the detector is found nowhere either, unless the matrix effect is known and divided out.
        const masked =
          open.matrixEffect === null
            ? methodFractions[code].reduce((sum, fraction) => sum + (collected[fraction] ?? 0), 0)
            : 0;
        const expected = 100 * (lost + masked * (1 - signalLeft(demoAnalyte(name), code)));
        const se = withShared(open.open.se, 100, open.downstream.estimate ?? 0);
        // A load effluent not detected may hold up to 2.5 % of the spike (0.5 ng/mL from a tenth of it), each fraction less.
        return [
          {
            what: `${name} by ${code}`,
            found: open.open.estimate,
            expected,
            se,
            df: open.open.df ?? 4,
            allowance: 3
          }
        ];
      })
    );
    expect(comparisons.length).toBeGreaterThan(60);
    expectAgreement(comparisons);
  });

  it('finds what the humic matter of the extract at pH 2 leaves of each signal', () => {
    const comparisons = targets.flatMap((name): Comparison[] => {
      const matrix = figures.matrix(topOf('B').id, entryNamed(name).id);
      // Amounts that rest on a final volume are not compared where the volumes differ.
      if (!matrix?.available) return [];
      const { estimate, se, df } = matrix.figures.matrixEffect;
      if (estimate === null || se === null) return [];
      const expected = 100 * demoAnalyte(name).masking;
      return [{ what: name, found: estimate, expected, se: withShared(se), df: df ?? 4, allowance: 0 }];
    });
    expect(comparisons.length).toBeGreaterThan(20);
    expectAgreement(comparisons);
  });

  it('reads the surrogates near their true recovery, in every kind of portion', () => {
    const comparisons = variantCodes.flatMap((code) =>
      demoPanel
        .filter(({ role }) => role === 'surrogate')
        .map(({ name }): Comparison => {
          const { description, portions } = figures.surrogate(topOf(code).id, entryNamed(name).id);
          if (!description || description.se === null)
            throw new Error(`no surrogate figure of ${name} by ${code}`);
          const received = topOf(code).replicates.filter(({ kind }) =>
            ['spiked', 'unspiked', 'method blank'].includes(kind)
          );
          expect(portions).toHaveLength(received.length);
          const { signal, method } = trueOf(name, code);
          const se = withShared(Math.max(description.se, 0.05), description.mean);
          const expected = 100 * signal * method;
          return {
            what: `${name} by ${code}`,
            found: description.mean,
            expected,
            se,
            df: description.n - 1,
            allowance: 1
          };
        })
    );
    expectAgreement(comparisons);
  });

  it('reads a substance that the extract lost wholly as outside, though the balance finds it', () => {
    const entry = figures.entry(topOf('D').id, entryNamed('Gabapentin').id);
    if (!entry.ready) throw new Error(entry.reason);
    expect(entry.balance.method?.mean).toBeLessThan(1);
    expect(entry.verdict).toBe('outside');
    const { signal } = trueOf('Gabapentin', 'D');
    expect(Math.abs((entry.balance.balance?.mean ?? 0) - 100 * signal)).toBeLessThan(6);
  });

  it('leaves out the portion that was set aside with its cause, and counts it when the exclusion is looked past', () => {
    const experiment = topOf('D');
    const planned = demoExperiments.find(({ key }) => key === 'D')?.portions.find(({ mishap }) => mishap);
    expect(experiment.exclusions.map(({ cause }) => cause)).toEqual([planned?.mishap?.cause]);
    const entry = figures.entry(experiment.id, entryNamed('Carbamazepine').id);
    if (!entry.ready) throw new Error(entry.reason);
    expect(entry.input.counted.map(({ replicate }) => replicate.label)).not.toContain(planned?.label);
    expect(entry.input.portions).toHaveLength(7);
    expect(entry.input.counted).toHaveLength(6);
  });

  it('gives variant D most targets inside, and the rest watch or outside for a true reason', () => {
    const verdicts = Object.fromEntries(
      targets.map((name) => {
        const entry = figures.entry(topOf('D').id, entryNamed(name).id);
        return [name, entry.ready ? entry.verdict : null];
      })
    );
    const of = (verdict: string) => targets.filter((name) => verdicts[name] === verdict).sort();
    // Below 70 % in truth: held too fast, washed through, blown off, or both of the last two.
    expect(of('outside')).toEqual(['Gabapentin', 'Metformin', 'N-Nitrosodimethylamine', 'Pyridine']);
    for (const name of of('outside')) {
      const { signal, method } = trueOf(name, 'D');
      expect(100 * signal * method).toBeLessThan(70);
    }
    // More of it in the water than was spiked.
    expect(demoAnalyte('1H-Benzotriazole').nativeNgPerL / 2).toBeGreaterThan(spikeNg);
    expect(of('watch')).toContain('1H-Benzotriazole');
    expect(of('inside').length).toBeGreaterThanOrEqual(16);
  });
});
