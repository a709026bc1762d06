import { Molecule } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { nameKey, parseCas } from '../../../src/lib/domain/name-key';
import { criteriaSetForm } from '../../../src/lib/schemas/criteria-set';
import { libraryCriteriaSets } from '../../../seeders/library/criteria-sets';
import { libraryAnalyte, libraryAnalytes } from '../../../seeders/library/analytes';

const elements = (formula: string) =>
  Object.fromEntries(
    [...formula.matchAll(/([A-Z][a-z]?)(\d*)/g)].map(([, symbol, count]) => [symbol, Number(count || 1)])
  );

describe('the library a new lab begins with', () => {
  it('holds 42 substances and the standards beside them, under names that stay apart', () => {
    expect(libraryAnalytes.filter((a) => !/labelled|uncommon/.test(a.class))).toHaveLength(42);
    const keys = libraryAnalytes.flatMap((a) =>
      [a.name, ...a.synonyms.filter((s) => nameKey(s) !== nameKey(a.name))].map(nameKey)
    );
    expect(new Set(keys).size).toBe(keys.length);
  });

  it.each(libraryAnalytes.map((a) => [a.name, a] as const))(
    'gives %s a CAS number whose check digit holds',
    (_, analyte) => {
      if (analyte.cas !== null) expect(parseCas(analyte.cas)).toBe(analyte.cas);
    }
  );

  // The structure is read by a program of its own: formula and molar mass have to come out of it.
  it.each(libraryAnalytes.filter((a) => a.smiles !== null).map((a) => [a.name, a] as const))(
    'gives %s the formula and molar mass of its structure',
    (_, analyte) => {
      const structure = Molecule.fromSmiles(analyte.smiles ?? '').getMolecularFormula();
      expect(elements(structure.formula)).toEqual(elements(analyte.formula ?? ''));
      expect(Math.abs(structure.relativeWeight - (analyte.molarMass ?? 0))).toBeLessThan(0.06);
    }
  );

  it('names a source for every property, and says where it is from memory', () => {
    for (const a of libraryAnalytes) {
      for (const property of [
        a.logKow,
        a.pkaAcid,
        a.pkaBase,
        a.boilingPointC,
        a.vapourPressurePa,
        a.henryPaM3Mol,
        a.waterSolubilityMgL
      ]) {
        if (property) expect(property.source.length).toBeGreaterThan(10);
      }
      for (const pka of [a.pkaAcid, a.pkaBase]) if (pka) expect(pka.source).toContain('from memory, verify');
    }
  });

  it('converts vapour pressure and Henry constant to pascals', () => {
    // Benchmarks from memory, verify: phenol about 47 Pa, naphthalene about 11 Pa and 45 Pa·m³/mol at 25 °C.
    expect(libraryAnalyte('Phenol').vapourPressurePa?.value).toBeCloseTo(46.66, 2);
    expect(libraryAnalyte('Naphthalene').vapourPressurePa?.value).toBeCloseTo(11.33, 2);
    expect(libraryAnalyte('Naphthalene').henryPaM3Mol?.value).toBeCloseTo(44.58, 2);
  });

  it('has criteria that the forms of the program would take, each with its citation and standing', () => {
    for (const set of libraryCriteriaSets) {
      const typed = { ...set, rules: set.rules.map((rule) => ({ ...rule, note: rule.note ?? '' })) };
      expect(criteriaSetForm.parse(typed)).toEqual(set);
      for (const rule of set.rules) {
        if (rule.standing === 'memory') expect(rule.note).toContain('From memory');
        expect(rule.standing === 'own').toBe(rule.year === null);
      }
    }
  });
});
