import { describe, expect, it } from 'vitest';
import { demoExperiments } from '../../../seeders/demo/experiments';
import { simulateCalibration, simulateExperiment, simulatePortions } from '../../../seeders/demo/generator';
import { demoAnalyte, demoPanel } from '../../../seeders/demo/panel';
import { cationShare, logD } from '../../../seeders/demo/partition';
import { createRandom } from '../../../seeders/demo/random';
import { truth } from '../../../seeders/demo/truth';

const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0);

describe('the generator behind the demo study', () => {
  it('has 26 targets, 3 surrogates and 3 injection internal standards', () => {
    const count = (role: string) => demoPanel.filter((analyte) => analyte.role === role).length;
    expect([count('target'), count('surrogate'), count('injection internal standard')]).toEqual([26, 3, 3]);
  });

  it('conserves every amount: in the truth, fractions and losses sum to 1', () => {
    for (const { fractions, lost, method, steps } of truth()) {
      expect(sum(Object.values(fractions)) + lost).toBeCloseTo(1, 12);
      expect(Math.min(lost, ...Object.values(fractions))).toBeGreaterThanOrEqual(-1e-12);
      expect(method).toBeCloseTo(steps.extraction * steps.drying * steps.concentration, 12);
    }
  });

  it('lets the method recovery be the sum of the fractions that end in the extract', () => {
    for (const experiment of demoExperiments.filter(({ stage }) => stage === 'extraction')) {
      const counted = experiment.fractions
        .filter(({ countsAs }) => countsAs === 'method')
        .map(({ name }) => name);
      for (const { variant, fractions, method } of truth()) {
        if (variant === experiment.key) {
          expect(sum(counted.map((name) => fractions[name] ?? 0))).toBeCloseTo(method, 12);
        }
      }
    }
  });

  it('conserves every amount in every simulated portion', () => {
    for (const experiment of demoExperiments) {
      for (const { contents } of simulatePortions(experiment)) {
        for (const { amount, fractions, lost } of contents.values()) {
          expect(sum(Object.values(fractions)) + lost).toBeCloseTo(amount, 9);
          expect(lost).toBeGreaterThanOrEqual(-1e-9);
        }
      }
    }
  });

  it('gives the same areas for the same seed, and others for another', () => {
    const experiment = demoExperiments[7]!;
    const areas = (seed?: number) => simulateExperiment(experiment, seed).map((vial) => [...vial.areas]);
    expect(areas(5)).toEqual(areas(5));
    expect(areas(6)).not.toEqual(areas(5));
  });

  it('reports every fraction of every portion once an injection', () => {
    for (const experiment of demoExperiments) {
      const vials = simulateExperiment(experiment);
      const vialsOf = (kind: string) => {
        if (kind === 'solvent standard') return 1;
        const method = experiment.fractions.filter(({ countsAs }) => countsAs === 'method');
        return kind === 'post-extraction spike' ? method.length : experiment.fractions.length;
      };
      expect(vials).toHaveLength(
        sum(experiment.portions.map(({ kind }) => vialsOf(kind))) * experiment.injections
      );
      const places = vials.map(({ sample, fraction, injection }) => `${sample}|${fraction}|${injection}`);
      expect(new Set(places).size).toBe(places.length);
    }
  });

  it('rises with the concentration in a calibration set', () => {
    for (const name of ['Metformin', 'Diuron']) {
      const areas = simulateCalibration(0).map((level) => level.areas.get(name) ?? 0);
      expect(areas).toEqual([...areas].sort((a, b) => a - b));
      expect(areas[0]).toBeGreaterThan(0);
    }
  });

  // Limits of the laws, by hand: a base two units below its pKa is 99 % charged, a neutral keeps its log Kow.
  it('charges bases and acids by their pKa', () => {
    expect(cationShare(demoAnalyte('Propranolol'), 7.45)).toBeCloseTo(100 / 101, 6);
    expect(logD(demoAnalyte('Naphthalene'), 2)).toBeCloseTo(3.3, 12);
    expect(logD(demoAnalyte('Ibuprofen'), 4.91)).toBeCloseTo(3.97 - Math.log10(2), 12);
    expect(cationShare(demoAnalyte('Gabapentin'), 7)).toBeLessThan(0.001);
  });

  it('draws normal values with the mean and the standard deviation asked for', () => {
    const chance = createRandom(1, 'check');
    const values = Array.from({ length: 20_000 }, () => chance.normal(2));
    const mean = sum(values) / values.length;
    const sd = Math.sqrt(sum(values.map((value) => (value - mean) ** 2)) / (values.length - 1));
    // Four standard errors of a mean (2/sqrt n) and of a standard deviation (2/sqrt 2n).
    expect(Math.abs(mean)).toBeLessThan(4 * 0.0142);
    expect(Math.abs(sd - 2)).toBeLessThan(4 * 0.01);
  });
});
