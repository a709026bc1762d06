import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { readStructure } from '../../../src/lib/server/chemistry/index';

const folder = new URL('../../../src/lib/server/chemistry/', import.meta.url);
const field = async <Key extends keyof Awaited<ReturnType<typeof readStructure>>>(smiles: string, key: Key) =>
  (await readStructure(smiles))[key];

test('the structure library is loaded when a structure is read, and not when the server starts', () => {
  const sources = readdirSync(folder).map((file) => readFileSync(new URL(file, folder), 'utf8'));
  expect(sources.join('\n')).toContain("import('openchemlib')");
  for (const source of sources) {
    expect(source).not.toMatch(/^import (?!type )[^;]*from 'openchemlib'/m);
    expect(source).not.toMatch(/^(?:export .* from|import) '(?:openchemlib|mathjs)'/m);
  }
});

describe('what a structure says', () => {
  test('formulas follow Hill: carbon, hydrogen and its isotopes, then by letter', async () => {
    expect(await field('Clc1ccc(O)c(Cl)c1', 'formula')).toBe('C6H4Cl2O');
    expect(await field('[2H]c1c(Cl)c([2H])c(Cl)c(O)c1[2H]', 'formula')).toBe('C6HD3Cl2O');
    expect(await field('[Na+].[Cl-]', 'formula')).toBe('ClNa');
    expect(await field('N', 'formula')).toBe('H3N');
  });

  test('a labelled carbon weighs what its isotope does (13C: 13.00335, from memory)', async () => {
    expect(await field('C[13CH3]', 'molarMass')).toBeCloseTo(12.011 + 13.00335 + 6 * 1.008, 2);
    expect(await field('C[13CH3]', 'monoisotopicMass')).toBeCloseTo(12 + 13.003355 + 6 * 1.007825, 5);
  });

  test('an element outside the table of weights is weighed by the library', async () => {
    expect(await field('[W]', 'molarMass')).toBeCloseTo(183.84, 2);
  });

  test('one substance written in several ways has one canonical form, stereo isomers share the flat one', async () => {
    expect(await field('OC(=O)c1ccccc1', 'canonical')).toBe(await field('c1ccccc1C(O)=O', 'canonical'));
    expect(await field('C1=CC=CC=C1', 'canonical')).toBe(await field('c1ccccc1', 'canonical'));
    const [left, right, open] = await Promise.all(
      ['C[C@H](N)C(O)=O', 'C[C@@H](N)C(O)=O', 'CC(N)C(O)=O'].map(readStructure)
    );
    expect(new Set([left!.canonical, right!.canonical, open!.canonical]).size).toBe(3);
    expect(new Set([left!.canonicalFlat, right!.canonicalFlat, open!.canonicalFlat]).size).toBe(1);
    expect(await field('C/C=C/C', 'canonical')).not.toBe(await field('C/C=C\\C', 'canonical'));
    // A mark where there is nothing to tell apart changes nothing.
    expect(await field('C[C@H](C)C', 'canonical')).toBe(await field('CC(C)C', 'canonical'));
  });

  test('log P is predicted for single neutral organic molecules only', async () => {
    expect(await field('CCCCCCCC', 'predictedLogP')).toBeGreaterThan(3);
    for (const smiles of ['CC(=O)[O-].[Na+]', 'C[N+](C)(C)C', 'CC(=O)[O-]', 'O', '[Fe]', 'CCO.O']) {
      expect(await field(smiles, 'predictedLogP'), smiles).toBeNull();
    }
  });
});

describe('charges', () => {
  test.each([
    ['tetramethylammonium', 'C[N+](C)(C)C', 1, 1],
    ['a bispyridinium', 'C[n+]1ccc(cc1)-c1cc[n+](C)cc1', 2, 2],
    ['its chloride counts the cation', '[Cl-].C[N+](C)(C)C', 0, 1],
    ['an inner salt', 'C[N+](C)(C)CC([O-])=O', 0, 1],
    ['a nitro group', 'C[N+](=O)[O-]', 0, 0],
    ['an N-oxide', 'C[N+](C)(C)[O-]', 0, 0],
    ['an azide', 'CN=[N+]=[N-]', 0, 0],
    ['an ammonium with hydrogen to give away', 'C[NH+](C)C', 1, 0],
    ['a carboxylate', 'CC(=O)[O-]', -1, 0],
    ['sodium beside an acid', '[Na+].CC(=O)[O-]', 0, 0],
    ['a phosphonium', 'C[P+](C)(C)C', 1, 1]
  ])('%s', async (_, smiles, formal, permanent) => {
    const { formalCharge, permanentCharge } = await readStructure(smiles);
    expect([formalCharge, permanentCharge]).toEqual([formal, permanent]);
  });
});

describe('groups that can be ionised', () => {
  test.each([
    ['acetic acid', 'CC(O)=O', ['carboxylic acid']],
    ['acetate', 'CC([O-])=O', ['carboxylic acid']],
    ['phenol', 'Oc1ccccc1', ['phenol']],
    ['a sulfonic acid', 'Cc1ccc(cc1)S(O)(=O)=O', ['sulfonic acid']],
    ['glyphosate', 'OC(=O)CNCP(O)(O)=O', ['carboxylic acid', 'aliphatic amine', 'acid of phosphorus']],
    ['triethylamine', 'CCN(CC)CC', ['aliphatic amine']],
    ['aniline', 'Nc1ccccc1', ['aromatic amine']],
    ['pyridine', 'c1ccncc1', ['nitrogen in an aromatic ring']],
    ['guanidine', 'NC(N)=N', ['amidine or guanidine']],
    ['an imine', 'CC=NC', ['imine']],
    ['ethanol', 'CCO', []],
    ['acetamide', 'CC(N)=O', []],
    ['a sulfonamide', 'CS(=O)(=O)NC', []],
    ['a nitrosamine', 'CN(C)N=O', []],
    ['nitrobenzene', 'O=[N+]([O-])c1ccccc1', []],
    ['acetonitrile', 'CC#N', []],
    ['an ester', 'CC(=O)OC', []],
    ['a quaternary ammonium', 'C[N+](C)(C)C', []],
    ['indole', 'c1ccc2[nH]ccc2c1', []],
    ['an enamine', 'CN(C)C=C', []]
  ])('%s', async (_, smiles, names) => {
    const { ionisable } = await readStructure(smiles);
    expect(ionisable.map(({ name }) => name).sort()).toEqual([...names].sort());
  });
});

test('a SMILES that cannot be read is refused with its text, the place and what is wrong', async () => {
  const refused: readonly (readonly [string, RegExp])[] = [
    ['', /there is no text/],
    ['   ', /there is no text/],
    ['xyz', /'xyz' cannot be read as SMILES: 'x' at position 1 is no atom/],
    ['CC(', /'CC\(' cannot be read as SMILES: a branch is opened by '\(' and never closed/],
    ['C(C(C', /2 branches are opened/],
    ['C1CC1%', /two digits of a ring number must follow '%'/],
    ['C1CC', /dangling ring closure: 1/],
    ['CC ethane', /a space at position 3/],
    ['C*', /placeholder/],
    ['CC~C', /placeholder/],
    ['C(C)(C)(C)(C)C', /atom 1 \(C\) has more bonds/],
    ['CC=', /it ends after '=', where an atom should follow/],
    ['C[', /the bracket at position 2 does not hold an atom/],
    ['.C', /'\.' at position 1 cannot stand first/],
    ['C==C', /'=' at position 3 cannot stand there/],
    ['C()C', /'\)' at position 3 cannot stand there/],
    ['C))', /'\)' at position 2 closes a branch that was never opened/],
    ['C6H6', /'H' at position 3 is no atom that may stand without brackets/],
    ['C\u{1f600}', /'\u{1f600}' at position 2 is no sign of SMILES/u],
    ['[CH4]C', /atom 1 \(C\) has more bonds/],
    ['C[NH3]C', /atom 2 \(N\) has more bonds/],
    ['C[C@H](C)(O)C', /atom 2 \(C\) has more bonds/],
    ['C[N+]', /atom 2 \(N\) has fewer bonds than it needs/],
    ['[H]', /atom 1 \(H\) has fewer bonds/],
    ['c1cccc1', /unpaired electron/],
    ['[CH3]', /unpaired electron/],
    ['C'.repeat(151), /it has 151 atoms, at most 150/],
    ['C'.repeat(2001), /it has 2001 characters, at most 2000/],
    ['<svg onload=alert(1)>', /cannot be read/]
  ];
  for (const [smiles, why] of refused) {
    await expect(readStructure(smiles), smiles).rejects.toMatchObject({
      name: 'ChemistryError',
      code: 'unreadable-structure',
      message: expect.stringMatching(why) as string
    });
  }
});

test('what is unusual and possible is read', async () => {
  const read: readonly (readonly [string, string])[] = [
    ['C[N+]#[C-]', 'C2H3N'],
    ['CN=[N+]=[N-]', 'CH3N3'],
    ['F[P-](F)(F)(F)(F)F', 'F6P'],
    ['[B-](F)(F)(F)F', 'BF4'],
    ['OI(=O)=O', 'HIO3'],
    ['CC[Pb](CC)(CC)CC', 'C8H20Pb'],
    ['N[Pt](N)(Cl)Cl', 'Cl2H4N2Pt'],
    ['c1cc[se]c1', 'C4H4Se'],
    ['C%10CC%10', 'C3H6'],
    ['C[C@TH1H](F)O', 'C2H5FO'],
    ['[13C@H](F)(Cl)[Br:3]', 'CHBrClF']
  ];
  for (const [smiles, formula] of read) expect(await field(smiles, 'formula'), smiles).toBe(formula);
});
