import { describe, expect, it } from 'vitest';
import { analyteForm, analytePreviewForm, analyteVersionForm } from '../../../src/lib/schemas/analyte';
import { Forbidden, Invalid } from '../../../src/lib/server/errors';
import { analyteChemistry, previewAnalyte } from '../../../src/lib/server/services/analyte-chemistry';
import { createAnalyte, getAnalyte, newAnalyteVersion } from '../../../src/lib/server/services/library';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';

const form = (fields: object) => analyteForm.parse(fields);
const preview = (fields: object) => analytePreviewForm.parse(fields);

/** The problems that an attempt is refused with, by field. */
async function problemsOf(attempt: Promise<unknown>): Promise<Record<string, string>> {
  const error = await attempt.then(
    () => null,
    (thrown: unknown) => thrown
  );
  if (!(error instanceof Invalid)) throw error ?? new Error('it was not refused');
  return Object.fromEntries(error.problems.map(({ path, message }) => [path, message]));
}

describe('the same substance twice', () => {
  it('is told by its structure, however that is written, and stored only where it is meant', async () => {
    const actor = await makeMember();
    await createAnalyte(actor, form({ name: 'Pyridine', smiles: 'c1ccncc1' }));
    const twin = { name: 'Azabenzene', smiles: 'N1=CC=CC=C1' };
    expect(await problemsOf(createAnalyte(actor, form(twin)))).toEqual({
      sameStructure: 'Pyridine in the library has this structure. Tick this if both are to stand there.'
    });
    await createAnalyte(actor, form({ ...twin, sameStructure: 'yes' }));
  });

  it('is not told of a labelled analogue', async () => {
    const actor = await makeMember();
    await createAnalyte(actor, form({ name: 'Pyridine', smiles: 'c1ccncc1' }));
    await createAnalyte(actor, form({ name: 'Pyridine-d1', smiles: '[2H]c1ccncc1' }));
  });

  it('is only mentioned where stereochemistry tells them apart', async () => {
    const actor = await makeMember();
    await createAnalyte(actor, form({ name: 'Mecoprop-P', smiles: 'C[C@@H](Oc1ccc(Cl)cc1C)C(O)=O' }));
    const racemate = { name: 'Mecoprop', smiles: 'CC(Oc1ccc(Cl)cc1C)C(O)=O' };
    const { alike } = await previewAnalyte(actor, preview(racemate), null);
    expect(alike.map(({ name, by }) => [name, by])).toEqual([['Mecoprop-P', 'stereochemistry']]);
    await createAnalyte(actor, form(racemate));
  });

  it('is told before anything is stored, by name and CAS number too, and not of the analyte itself', async () => {
    const actor = await makeMember();
    const fields = { name: 'Caffeine', cas: '58-08-2', smiles: 'Cn1c(=O)c2c(ncn2C)n(C)c1=O' };
    const id = await createAnalyte(actor, form(fields));
    const { alike } = await previewAnalyte(actor, preview(fields), null);
    expect(alike.map(({ by }) => by)).toEqual(['name', 'CAS number', 'structure']);
    expect((await previewAnalyte(actor, preview(fields), id)).alike).toEqual([]);
    await newAnalyteVersion(actor, id, analyteVersionForm.parse({ ...fields, note: 'seen', seenVersion: 1 }));
  });

  it('is not looked for in the library of another lab, and not by those who may not change it', async () => {
    const actor = await makeMember();
    await createAnalyte(actor, form({ name: 'Pyridine', smiles: 'c1ccncc1' }));
    const stranger = await makeMember();
    expect((await previewAnalyte(stranger, preview({ smiles: 'c1ccncc1' }), null)).alike).toEqual([]);
    const analyst = await makeMember({ lab: await makeLab(), role: 'analyst' });
    await expect(previewAnalyte(analyst, preview({ smiles: 'C' }), null)).rejects.toBeInstanceOf(Forbidden);
  });
});

describe('the fields of an analyte', () => {
  it('refuse a SMILES that cannot be read, with what would be right, and store nothing', async () => {
    const actor = await makeMember();
    const problems = await problemsOf(createAnalyte(actor, form({ name: 'Broken', smiles: 'c1ccccc' })));
    expect(problems.smiles).toMatch(
      /^'c1ccccc' cannot be read as SMILES: .*Write it like CC\(=O\)Oc1ccccc1C\(O\)=O/
    );
    expect(await problemsOf(previewAnalyte(actor, preview({ smiles: 'Pyridine' }), null))).toHaveProperty(
      'smiles'
    );
  });

  it('say which digit a CAS number lacks', () => {
    // 58-08-2: 8·1 + 0·2 + 8·3 + 5·4 = 52, so the check digit is 2.
    const refused = analyteForm.safeParse({ name: 'Caffeine', cas: '58-08-3' });
    expect(refused.error?.issues[0]?.message).toBe(
      "'58-08-3' is not a CAS number: after 58-08 the check digit is 2, not 3. Is a digit mistyped?"
    );
    const text = analyteForm.safeParse({ name: 'Caffeine', cas: 'caffeine' });
    expect(text.error?.issues[0]?.message).toMatch(
      /^'caffeine' is not a CAS number\. One is two to seven digits/
    );
  });
});

describe('typed beside computed', () => {
  it('uses what was typed and says where the structure disagrees', async () => {
    const actor = await makeMember();
    // 2-Methylphenol C7H8O: 7 × 12.011 + 8 × 1.008 + 15.999 = 108.14 g/mol
    const { structure } = await previewAnalyte(
      actor,
      preview({ name: 'o-Cresol', smiles: 'Cc1ccccc1O', formula: 'C7H9O', molarMass: '108,2' }),
      null
    );
    expect(structure.formula).toEqual({ typed: 'C7H9O', computed: 'C7H8O', agree: false });
    expect(structure.molarMass).toEqual({ typed: '108.2', computed: '108.14', agree: false });
    const alone = await previewAnalyte(actor, preview({ smiles: 'Cc1ccccc1O', molarMass: '108.14' }), null);
    expect(alone.structure.formula).toEqual({ typed: null, computed: 'C7H8O', agree: null });
    expect(alone.structure.molarMass.agree).toBe(true);
  });

  it('predicts log Kow only where the library holds none', async () => {
    const actor = await makeMember();
    const smiles = 'Cc1ccccc1O';
    const without = await createAnalyte(actor, form({ name: 'o-Cresol', smiles, pkaAcid: '10,3' }));
    const chemistry = await analyteChemistry(actor, (await getAnalyte(actor, without)).current);
    expect(chemistry.structure.logKow?.basis).toBe('predicted');
    await newAnalyteVersion(
      actor,
      without,
      analyteVersionForm.parse({
        name: 'o-Cresol',
        smiles,
        pkaAcid: '10,3',
        logKow: '1.95',
        sources: { logKow: 'a handbook' },
        seenVersion: 1
      })
    );
    const after = await analyteChemistry(actor, (await getAnalyte(actor, without)).current);
    expect(after.structure.logKow).toEqual({ value: 1.95, basis: 'library', source: 'a handbook' });
    // pKa 10.3 at pH 10: 1/(1 + 10^−0.3) = 0.66614; log D 1.95 + log10(0.66614) = 1.7736
    expect(after.atPhs.find(({ ph }) => ph === 10)?.logD).toBeCloseTo(1.7736, 4);
  });

  it('asks for the pKa that a structure makes one expect', async () => {
    const actor = await makeMember();
    const chemistryOf = async (fields: object) => {
      const id = await createAnalyte(actor, form(fields));
      return analyteChemistry(actor, (await getAnalyte(actor, id)).current);
    };
    const pyridine = await chemistryOf({ name: 'Pyridine', smiles: 'c1ccncc1', logKow: '0.65' });
    expect(pyridine.assumed).toMatch(/\(nitrogen in an aromatic ring\), and the library holds no pKa/);
    const naphthalene = await chemistryOf({ name: 'Naphthalene', smiles: 'c1ccc2ccccc2c1', logKow: '3.3' });
    expect(naphthalene.assumed).toMatch(/taken to have no group that ionises/);
    // An acid that is certain is not taken for neutral at all.
    const acid = await chemistryOf({
      name: 'Ibuprofen',
      smiles: 'CC(C)Cc1ccc(cc1)C(C)C(=O)O',
      logKow: '3.97'
    });
    expect(acid).toMatchObject({ assumed: null, curve: null, atPhs: [] });
    expect(acid.unknown).toContain('carboxylic acid');
  });

  it('tells impossible values on file instead of failing', async () => {
    const actor = await makeMember();
    const id = await createAnalyte(
      actor,
      form({ name: 'Impossible', logKow: '2', pkaAcid: '99', boilingPointC: '9000' })
    );
    const chemistry = await analyteChemistry(actor, (await getAnalyte(actor, id)).current);
    expect(chemistry.unknown).toMatch(/99/);
    expect(chemistry.volatility.sentence).toMatch(/^Nothing is said of evaporation: .*9000/);
  });
});
