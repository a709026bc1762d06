import { beforeAll, describe, expect, it } from 'vitest';
import { demoPanel } from '../../../seeders/demo/panel';
import { demoVariants } from '../../../seeders/demo/procedures';
import { stockLibrary } from '../../../seeders/library/stock-library';
import type { Actor } from '../../../src/lib/domain/actor';
import { chemistryParameters, readChemistryPage } from '../../../src/lib/schemas/panel-chemistry';
import { stepsForm } from '../../../src/lib/schemas/variant';
import { NotFound } from '../../../src/lib/server/errors';
import { chemistryCsv } from '../../../src/lib/server/reports/chemistry-csv';
import { openSubstance, panelChemistry } from '../../../src/lib/server/services/panel-chemistry';
import { pastePanel } from '../../../src/lib/server/services/panels';
import { createVariant, setProcedureSteps } from '../../../src/lib/server/services/variants';
import type { PanelChemistryRow, PanelChemistryView } from '../../../src/lib/views/panel-chemistry';
import { makeAnalyte } from '../../factories/analyte';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStudy } from '../../factories/study';

/*
 * The panel and the procedures of the demo study, with the library that every lab begins with. Expected shares are formed here
 * by hand from the pKa values in the library: 1/(1 + 10^(pH − pKa)) for an acid, 1/(1 + 10^(pKa − pH)) for a base (Henderson and
 * Hasselbalch, textbook), their product for both; log D is log Kow plus the logarithm of the share.
 */
const code = 'CHEMISTRY';
const asked = (fields: Record<string, string> = {}) => chemistryParameters.parse(fields);
const plainly = { order: 'pka', href: (entryId: string) => `?analyte=${entryId}` } as const;

let chemist: Actor;
let view: PanelChemistryView;
const rowsOf = ({ groups }: PanelChemistryView): readonly PanelChemistryRow[] =>
  groups.flatMap(({ rows }) => rows);
const rowOf = (name: string, from = view): PanelChemistryRow => {
  const row = rowsOf(from).find((one) => one.name === name);
  if (!row) throw new Error(`there is no row of ${name}`);
  return row;
};

beforeAll(async () => {
  const lab = await makeLab();
  await stockLibrary(await makeMember({ lab, role: 'manager' }));
  chemist = await makeMember({ lab });
  await makeStudy(chemist, { code, sampleVolumeMl: 500 });
  for (const role of ['target', 'surrogate', 'injection internal standard'] as const) {
    const names = demoPanel.filter((analyte) => analyte.role === role).map(({ name }) => name);
    await pastePanel(chemist, code, { text: names.join('\n'), role });
  }
  for (const variant of demoVariants) {
    await createVariant(chemist, code, variant);
    const steps = variant.steps.map(({ stage, kind, instruction, parameters }) => ({
      stageKey: stage,
      kind,
      instruction,
      ...parameters
    }));
    await setProcedureSteps(chemist, code, variant.code, stepsForm.parse({ version: 1, steps }));
  }
  view = await panelChemistry(chemist, code, asked(), plainly);
});

describe('the pH of a panel', () => {
  it('is that of the variants unless another is asked for', async () => {
    expect(view.ph).toBe(7);
    expect(view.phReason).toBe('at which variant D takes its analytes up');
    expect(view.planned.map(({ ph, variants }) => [ph, variants.map((one) => one.code).join()])).toEqual([
      [2, 'A,B'],
      [7, 'C,D']
    ]);
    const acid = await panelChemistry(chemist, code, asked({ ph: '2,5' }), plainly);
    expect(acid).toMatchObject({ ph: 2.5, phReason: 'chosen here' });
  });

  it('is 7 where no variant says one', async () => {
    await makeStudy(chemist, { code: 'BARE' });
    const bare = await panelChemistry(chemist, 'BARE', asked(), plainly);
    expect(bare).toMatchObject({
      ph: 7,
      phReason: 'no variant says at which pH it loads',
      lead: '',
      groups: []
    });
    expect(bare.sampleFormat).toBeNull();
  });
});

describe('shares and log D at pH 7', () => {
  it.each([
    // pKa 4.91: 1/(1 + 10^2.09) = 1/124.027; log Kow 3.97 − 2.0935
    ['Ibuprofen', 1 / 124.027, 3.97 - 2.0935, 'negative'],
    // pKa 9.6: 1/(1 + 10^2.6) = 1/399.107; log Kow 0.16 − 2.6011
    ['Atenolol', 1 / 399.107, 0.16 - 2.6011, 'positive'],
    // acid 5.7, base 1.7: 1/(1 + 10^1.3) × 1/(1 + 10^−5.3) = 0.0477268; log Kow 0.89 − 1.3212
    ['Sulfamethoxazole', 0.0477268, 0.89 - 1.3212, 'negative'],
    // acid 3.68, base 10.7, charged at both ends: 1/(1 + 10^3.32) × 1/(1 + 10^3.7) = 9.543e-8; log Kow −1.1 − 7.0203
    ['Gabapentin', 9.543e-8, -1.1 - 7.0203, 'both'],
    // no group that ionises: log D is log Kow
    ['Naphthalene', 1, 3.3, 'none']
  ])('of %s', (name, neutral, logD, charge) => {
    const row = rowOf(name);
    expect(row.neutral! / neutral).toBeCloseTo(1, 3);
    expect(row.logD).toBeCloseTo(logD, 3);
    expect(row.charge).toBe(charge);
  });

  it('finds the edges of 99 % at log10(99) from the pKa', () => {
    // An acid is 99 % neutral where 10^(pH − pKa) = 1/99.
    expect(rowOf('Ibuprofen').neutralRanges).toEqual([{ low: 0, high: expect.closeTo(4.91 - 1.995635, 5) }]);
    expect(rowOf('Ibuprofen').chargedRanges).toEqual([{ low: expect.closeTo(4.91 + 1.995635, 5), high: 14 }]);
    expect(rowOf('Atenolol').neutralRanges).toEqual([{ low: expect.closeTo(9.6 + 1.995635, 5), high: 14 }]);
    expect(rowOf('Naphthalene').neutralRanges).toEqual([{ low: 0, high: 14 }]);
    // Metformin, 12.4 and 2.8: 99 % neutral only above 14.4.
    expect(rowOf('Metformin').neutralRanges).toEqual([]);
  });

  it('gives the curve the same shares as the rows', () => {
    const { curve, neutral } = rowOf('Ibuprofen');
    expect(curve?.values[(7 - curve.from) / curve.step]).toBeCloseTo(neutral ?? NaN, 4);
    expect(curve?.values).toHaveLength(57);
  });
});

describe('the panel in a sentence and in groups', () => {
  it('counts what is neutral, and says where the others would be', () => {
    /*
     * By hand from the pKa values: at least 99 % neutral are caffeine, carbamazepine, atrazine, diuron, dimethoate, metolachlor,
     * naphthalene, N-nitrosodimethylamine, aniline (4.6: 99.60 %), 4-chloroaniline (3.98), phenol (9.99: 99.90 %) and bisphenol A
     * (9.6 and 10.2: 99.69 %). The strongest acid is 2,4-D (2.73 − 1.9956 = 0.734), the strongest of the bases that get there
     * atenolol (11.596); benzotriazole (8.37 and 1.6) lies between 3.596 and 6.374; metformin, gabapentin and sulfamethoxazole
     * (5.7 and 1.7, 4 units apart) never get there. Nothing is known of the three labelled surrogates.
     */
    expect(view.lead).toBe(
      'At pH 7, 12 of 26 are at least 99 % neutral. Of the other 14, 5 would be below pH 0.7, 5 above pH 11.6 and ' +
        '1 from pH 3.6 to 6.3. 3 are neutral at no pH. Of 3 the charge is not known.'
    );
  });

  it('puts every analyte that is extracted into one group, and says who is left out', () => {
    const extracted = demoPanel.filter(({ role }) => role !== 'injection internal standard');
    expect(
      rowsOf(view)
        .map(({ name }) => name)
        .sort()
    ).toEqual(extracted.map(({ name }) => name).sort());
    const namesOf = (key: string) =>
      view.groups.find((group) => group.key === key)?.rows.map(({ name }) => name);
    expect(namesOf('acid')).toContain('Ibuprofen');
    expect(namesOf('base')).toContain('Atenolol');
    expect(namesOf('charged')).toEqual(['Metformin']);
    expect(view.notes.join(' ')).toContain(
      'Left out: Carbamazepine-d10, 2,4-Dichlorophenol-d3 and Phenanthrene-d10'
    );
    expect(view.further.find(({ key }) => key === 'volatile')?.names).toContain('N-Nitrosodimethylamine');
  });

  it('never takes an acid for neutral because nobody typed its pKa', () => {
    const row = rowOf('Ibuprofen-d3');
    expect(row).toMatchObject({ neutral: null, charge: null, logD: null, curve: null });
    expect(row.unknown).not.toBeNull();
    expect(view.groups.find(({ key }) => key === 'unknown')?.rows.map(({ name }) => name)).toContain(
      'Ibuprofen-d3'
    );
  });

  it('orders a group by where its shares turn, or by name', async () => {
    const acids = (from: PanelChemistryView) => from.groups.find(({ key }) => key === 'acid')?.rows ?? [];
    const edges = acids(view).map(({ neutralRanges: [range] }) => range?.high ?? NaN);
    expect(edges).toEqual([...edges].sort((a, b) => a - b));
    const named = await panelChemistry(chemist, code, asked(), { ...plainly, order: 'name' });
    const names = acids(named).map(({ name }) => name);
    expect(names).toEqual([...names].sort((a, b) => a.localeCompare(b)));
  });

  it('knows a charge that no pH takes away from the structure', async () => {
    const quat = await makeAnalyte(chemist.labId, {
      name: 'Made-up quat',
      smiles: 'C[N+](C)(C)C',
      logKow: -2
    });
    const { study } = await makeStudy(chemist, { code: 'QUAT' });
    await makePanelEntry(study, { analyte: quat });
    const found = await panelChemistry(chemist, 'QUAT', asked(), plainly);
    expect(rowOf('Made-up quat', found)).toMatchObject({ neutral: 0, charge: 'positive', logD: null });
    expect(found.groups.map(({ key }) => key)).toEqual(['charged']);
  });
});

describe('the format of the sample', () => {
  it('follows from the study, and from solids that are typed', async () => {
    expect(view.sampleFormat?.sentence).toMatch(
      /^For 500 mL: a cartridge \(.*\), whether a pre-filter is needed is not known/
    );
    const cloudy = await panelChemistry(chemist, code, asked({ solids: '800' }), plainly);
    expect(cloudy.sampleFormat?.sentence).toMatch(/with 800 mg\/L of solids: a .* a pre-filter\./);
  });
});

describe('one substance', () => {
  const bed = { bed: null, plates: null, loss: null, volume: null };

  it('opens with its structure, its charge at the planned pH values too, and an estimate for the usual bed', async () => {
    const open = await openSubstance(chemist, code, rowOf('Pyridine').panelEntryId, { ...asked(), ...bed });
    expect(open.structure.formula).toEqual({ typed: 'C5H5N', computed: 'C5H5N', agree: true });
    expect(open.structure.drawing).toMatch(/^<svg /);
    expect(open.structure.logKow).toMatchObject({ value: 0.65, basis: 'library' });
    expect(open.atPhs.map(({ ph }) => ph)).toEqual([7, 2]);
    // pKa 5.23 at pH 2: 1/(1 + 10^3.23) = 0.0005885 neutral
    expect(open.atPhs[1]?.shares.neutral).toBeCloseTo(0.0005885, 6);
    expect(open.atPhs[1]?.shares.cation).toBeCloseTo(0.9994115, 6);
    /*
     * 500 mg × 1.2 µL/mg = 0.6 mL; k = 10^0.65 × 1/(1 + 10^(5.23 − 7)) = 4.4668 × 0.98330 = 4.3922;
     * V_R = 0.6 × (1 + 4.3922) = 3.2353 mL.
     */
    expect(open.breakthrough.estimate?.holdUpMl).toBeCloseTo(0.6, 9);
    expect(open.breakthrough.estimate?.retentionMl.middle).toBeCloseTo(3.2353, 3);
    expect(open.breakthrough).toMatchObject({
      bedMassMg: 500,
      lossPercent: 5,
      sampleVolumeMl: 500,
      why: null
    });
    // 1 to 5 % of 500 mg.
    expect(open.breakthrough.capacity[0]?.evidence).toBe('500 mg of bonded silica hold 5 to 25 mg in all.');
    expect(open.breakthrough.estimate?.cautions.some(({ source }) => source.includes('Poole'))).toBe(true);
    expect(open.volatility.findings.some(({ evidence }) => evidence.includes('Pyridine'))).toBe(true);
  });

  it('says why nothing is estimated where nothing is known', async () => {
    const id = rowOf('Ibuprofen-d3').panelEntryId;
    const open = await openSubstance(chemist, code, id, { ...asked(), ...bed });
    expect(open.breakthrough.estimate).toBeNull();
    expect(open.breakthrough.why).toMatch(/^Nothing can be estimated: /);
    expect(open.atPhs).toEqual([]);
    expect(open.structure.formula.computed).not.toBeNull();
  });

  it('marks a predicted log Kow, and takes it only where none was typed', async () => {
    const typed = { cas: null, smiles: 'Cc1ccccc1O', pkaAcid: [10.3] };
    const made = await makeAnalyte(chemist.labId, { name: 'Made-up cresol', ...typed });
    const { study } = await makeStudy(chemist, { code: 'PREDICTED' });
    const entry = await makePanelEntry(study, { analyte: made });
    const open = await openSubstance(chemist, 'PREDICTED', entry.id, { ...asked(), ...bed });
    expect(open.structure.logKow?.basis).toBe('predicted');
    expect(open.structure.logKow?.source).toContain('predicted');
    expect(open.breakthrough.estimate).not.toBeNull();
  });

  it('is not there for another lab, another panel or an id that is none', async () => {
    const stranger = await makeMember();
    const id = rowOf('Pyridine').panelEntryId;
    await expect(panelChemistry(stranger, code, asked(), plainly)).rejects.toBeInstanceOf(NotFound);
    await expect(openSubstance(stranger, code, id, { ...asked(), ...bed })).rejects.toBeInstanceOf(NotFound);
    await makeStudy(chemist, { code: 'OTHER' });
    await expect(openSubstance(chemist, 'OTHER', id, { ...asked(), ...bed })).rejects.toBeInstanceOf(
      NotFound
    );
    await expect(openSubstance(chemist, code, 'no id', { ...asked(), ...bed })).rejects.toBeInstanceOf(
      NotFound
    );
  });
});

it('gives the table as CSV, unrounded, with what is predicted or not known said in its row', () => {
  const lines = chemistryCsv(view, { study: code, labName: 'Weir House', labIsDemo: true }).split('\r\n');
  const line = (name: string) => lines.find((text) => text.includes(`,${name},`)) ?? '';
  expect(line('Ibuprofen')).toMatch(
    /^CHEMISTRY,Ibuprofen,target,.*,7,0\.80627\d+,negative,1\.8764\d+,0 to 2\.9143\d+,6\.9056\d+ to 14,Weir House \(invented demo data\)$/
  );
  expect(line('Ibuprofen-d3')).toMatch(/,7,,not known,,,,Weir House/);
  expect(lines).toHaveLength(1 + 29 + 1);
});

it('reads an address as far as it can be read, and says what is wrong with the rest', () => {
  const { query, errors } = readChemistryPage({
    ph: '7,4',
    bed: '200',
    plates: 'many',
    loss: '70',
    phase: 'sand'
  });
  expect(query).toMatchObject({ ph: 7.4, bed: 200, plates: null, loss: null, phase: 'c18', order: 'pka' });
  expect(Object.keys(errors).sort()).toEqual(['loss', 'phase', 'plates']);
  expect(readChemistryPage({ ph: '15' }).errors.ph).toBe('Must be 14 or less.');
});
