import { describe, expect, it } from 'vitest';
import { readStructure } from '../../src/lib/server/chemistry/index';
import { structures } from './data/structures';

describe('formula and molar mass of 42 substances, against RDKit (printed to 0.01 g/mol)', () => {
  // RDKit takes chlorine as 35.453 and sulfur as 32.067 (from memory), conventional weights are 35.45 and 32.06.
  it.each(structures)('$name is $formula, $molarMass g/mol', async ({ smiles, formula, molarMass }) => {
    const read = await readStructure(smiles);
    expect(read.formula).toBe(formula);
    expect(Math.abs(read.molarMass - molarMass)).toBeLessThanOrEqual(0.025);
  });
});

describe('molar masses by hand', () => {
  // IUPAC 2021 conventional weights, from memory: C 12.011, H 1.008, N 14.007, O 15.999, S 32.06, I 126.90447, D 2.014102.
  it.each([
    ['sulfamethoxazole', 'Cc1cc(NS(=O)(=O)c2ccc(N)cc2)no1', 'C10H11N3O3S', 253.276],
    ['iopromide', structures.find(({ name }) => name === 'Iopromide')!.smiles, 'C18H24I3N3O8', 791.11641],
    ['phenol-d6', '[2H]Oc1c([2H])c([2H])c([2H])c([2H])c1[2H]', 'C6D6O', 100.149612]
  ])('%s', async (_, smiles, formula, mass) => {
    const read = await readStructure(smiles);
    expect(read.formula).toBe(formula);
    expect(read.molarMass).toBeCloseTo(mass, 5);
  });
});

describe('predicted log P', () => {
  it('is within 0.6 of the measured log Kow for half of 40 substances, and off by more than 1 for five (EPA/SRC KOWWIN set)', async () => {
    const errors: number[] = [];
    for (const { smiles, logKow } of structures) {
      const { predictedLogP } = await readStructure(smiles);
      if (logKow !== null && predictedLogP !== null) errors.push(Math.abs(predictedLogP - logKow));
    }
    errors.sort((a, b) => a - b);
    expect(errors).toHaveLength(40);
    expect(errors[20]).toBeLessThan(0.6);
    expect(errors.filter((error) => error > 1)).toHaveLength(5);
  });
});
