import ExcelJS from 'exceljs';
import { beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../../src/lib/domain/actor';
import type { PanelEntry } from '../../../src/lib/server/db/models/panel-entry';
import { StageEvidence } from '../../../src/lib/server/db/models/stage-evidence';
import { inTransaction } from '../../../src/lib/server/db/transaction';
import { Invalid, NotFound } from '../../../src/lib/server/errors';
import { summaryWorkbook } from '../../../src/lib/server/reports/summary-xlsx';
import { exclude, lift } from '../../../src/lib/server/services/exclusions';
import { withdrawImport } from '../../../src/lib/server/services/imports';
import {
  massBalanceView,
  provenanceView,
  resultsTableView,
  stageLadderView,
  walkBackView
} from '../../../src/lib/server/services/results';
import { exportedSummary, summaryView } from '../../../src/lib/server/services/summaries';
import type { MassBalanceRow } from '../../../src/lib/views/mass-balance';
import { makeCalibrationSet } from '../../factories/calibration-set';
import { makeExperiment, type MadeExperiment } from '../../factories/experiment';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStoredImport, type MadeNumber } from '../../factories/stored-import';
import { makeStudy, type MadeStudy } from '../../factories/study';
import { makeVariant } from '../../factories/variant';

const asAddress = (address: string): string => address;

let actor: Actor;
let made: MadeStudy;
let code: string;

beforeEach(async () => {
  actor = await makeMember();
  made = await makeStudy(actor);
  code = made.study.code;
});

/** ng of one analyte in one fraction of the spiked portions, in their order. */
function amounts(
  { experiment, fractions, replicates }: MadeExperiment,
  entry: PanelEntry,
  fraction: number,
  values: readonly (number | null)[],
  more: Partial<MadeNumber> = {}
): MadeNumber[] {
  return values.map((reported, index) => ({
    experimentId: experiment.id,
    replicateId: replicates[index]!.id,
    fractionId: fractions[fraction]!.id,
    analyteId: entry.analyteId,
    reported,
    basis: 'ng',
    state: reported === null ? ('not detected' as const) : ('value' as const),
    ...more
  }));
}

async function rowOf(name: string): Promise<MassBalanceRow> {
  const { balance } = await massBalanceView(actor, code, {}, asAddress);
  const row = balance.rows.find((item) => item.name === name);
  if (!row) throw new Error(`no row of ${name}`);
  return row;
}

const twoFractions = [
  { name: 'Elution' },
  { name: 'Load effluent', kind: 'load effluent', countsAs: 'balance' }
] as const;

describe('a wholly lost analyte', () => {
  it('reads outside though the balance finds it elsewhere', async () => {
    const entry = await makePanelEntry(made.study, { name: 'Lostamine' });
    const experiment = await makeExperiment(made, {
      fractions: twoFractions,
      replicates: { spiked: 5 },
      spikes: { [entry.id]: 100 }
    });
    await makeStoredImport(actor, made.study, [
      ...amounts(experiment, entry, 0, [0, 0, 0, 0, 0]),
      ...amounts(experiment, entry, 1, [96, 97, 98, 99, 100])
    ]);
    const row = await rowOf('Lostamine');
    expect(row).toMatchObject({ verdict: 'outside', method: { mean: 0, n: 5 }, total: 98 });
    expect(row.segments.map((segment) => [segment.countsAs, segment.mean])).toEqual([
      ['method', 0],
      ['balance', 98]
    ]);
  });
});

describe('an analyte read against a labelled extraction standard', () => {
  it('has no stage loss and no balance, and is told why', async () => {
    const label = await makePanelEntry(made.study, { name: 'Label', role: 'extraction internal standard' });
    const entry = await makePanelEntry(made.study, { name: 'Paired', internalStandardEntryId: label.id });
    const experiment = await makeExperiment(made, {
      replicates: { spiked: 3 },
      spikes: { [entry.id]: 100, [label.id]: 50 }
    });
    const variant = await makeVariant(made.study);
    await StageEvidence.create({
      labId: actor.labId,
      studyId: made.study.id,
      variantId: variant.id,
      stageId: made.stages.extraction!,
      experimentId: experiment.experiment.id
    });
    await makeStoredImport(actor, made.study, amounts(experiment, entry, 0, [97, 98, 99]));

    const row = await rowOf('Paired');
    expect(row).toMatchObject({ method: null, verdict: null, open: null, segments: [] });
    expect(row.reasons.join()).toContain('Label, which was added before extraction');
    const { walkBack } = await walkBackView(actor, code, {}, asAddress);
    expect(walkBack.rows[0]?.losses.every((loss) => loss === null)).toBe(true);
    expect(walkBack.rows[0]?.gap).toContain('no absolute amount, stage loss, mass balance or forecast');
    const { results } = await resultsTableView(actor, code, {}, asAddress);
    expect(results?.rows[0]?.relative).toMatchObject({ n: 3, standard: 'Label' });
    expect(results?.rows[0]?.relative?.mean).toBeCloseTo(98, 9);
  });
});

describe('the figures of a study', () => {
  let entry: PanelEntry;
  let experiment: MadeExperiment;

  beforeEach(async () => {
    entry = await makePanelEntry(made.study, { name: 'Atrazine' });
    experiment = await makeExperiment(made, { replicates: { spiked: 5 }, spikes: { [entry.id]: 100 } });
    await makeStoredImport(actor, made.study, amounts(experiment, entry, 0, [90, 92, 94, 96, 148]));
  });

  it('change when a portion is set aside and come back when that is lifted', async () => {
    expect((await rowOf('Atrazine')).method).toMatchObject({ n: 5, mean: 104 });
    const exclusionId = await exclude(actor, code, 1, {
      replicateId: experiment.replicates[4]!.id,
      fractionId: null,
      analyteId: null,
      cause: 'vial cracked'
    });
    expect((await rowOf('Atrazine')).method).toMatchObject({ n: 4, mean: 93 });
    await lift(actor, code, { exclusionId, reason: 'it was another vial' });
    expect((await rowOf('Atrazine')).method).toMatchObject({ n: 5, mean: 104 });
  });

  it('follow a later import place by place, and return when it is withdrawn', async () => {
    const later = await makeStoredImport(actor, made.study, amounts(experiment, entry, 0, [100]));
    // Portion 1 reads 100 instead of 90: (100 + 92 + 94 + 96 + 148)/5 = 106.
    expect((await rowOf('Atrazine')).method).toMatchObject({ n: 5, mean: 106 });
    await withdrawImport(actor, code, later.id, 'wrong file');
    expect((await rowOf('Atrazine')).method).toMatchObject({ n: 5, mean: 104 });
  });

  it('are computed anew inside a transaction that changes them, and not kept when it fails', async () => {
    const place = {
      replicateId: experiment.replicates[4]!.id,
      fractionId: null,
      analyteId: null,
      cause: 'spilt'
    };
    await rowOf('Atrazine');
    await expect(
      inTransaction(actor, { study: made.study.id }, async () => {
        await exclude(actor, code, 1, place);
        expect((await rowOf('Atrazine')).method?.n).toBe(4);
        throw new Error('changed my mind');
      })
    ).rejects.toThrow('changed my mind');
    expect((await rowOf('Atrazine')).method?.n).toBe(5);
  });

  it('belong to their lab: another one finds nothing at the address', async () => {
    const stranger = await makeMember();
    await expect(massBalanceView(stranger, code, {}, asAddress)).rejects.toThrow(NotFound);
    await expect(summaryView(stranger, code, asAddress)).rejects.toThrow(NotFound);
    await expect(provenanceView(stranger, code, `recovery:1:${entry.id}`, asAddress)).rejects.toThrow(
      NotFound
    );
  });

  it('say what is missing while no variant is described', async () => {
    const { ladder, findings } = await stageLadderView(actor, code, {}, asAddress);
    expect(ladder.reaches.map((reach) => reach.number)).toEqual([4, 3, 2, 1]);
    expect(ladder.reaches.every((reach) => reach.gap !== null)).toBe(true);
    expect(findings.lead).toContain('No variant has been measured');
  });

  it('name every stage that a loss may come from when the stages below have no experiment', async () => {
    const variant = await makeVariant(made.study);
    await StageEvidence.create({
      labId: actor.labId,
      studyId: made.study.id,
      variantId: variant.id,
      stageId: made.stages.extraction!,
      experimentId: experiment.experiment.id
    });
    await makeStoredImport(actor, made.study, amounts(experiment, entry, 0, [51, 52, 53, 54, 55]));
    const { findings, ladder } = await stageLadderView(actor, code, {}, asAddress);
    // 100 - 53 = 47 points.
    expect(findings.lead).toMatch(
      /^Concentration, drying and extraction together take 47.0 points of Atrazine/
    );
    expect(ladder.reaches[0]?.gap?.text).toContain('Includes what concentration and drying take');
    expect(findings.notes.join()).toContain('held against exactly 100');
  });

  it('refuse an address that is none, and one that points at nothing', async () => {
    await expect(provenanceView(actor, code, 'recovery:1:x', asAddress)).rejects.toThrow(Invalid);
    await expect(provenanceView(actor, code, `recovery:9:${entry.id}`, asAddress)).rejects.toThrow(NotFound);
  });
});

describe('provenance', () => {
  it('leads from the mean over the portion and its amount to file, sheet and cell', async () => {
    const entry = await makePanelEntry(made.study, { name: 'Diuron' });
    const { set, levels } = await makeCalibrationSet(made.study, { panelEntryIds: [entry.id] });
    const experiment = await makeExperiment(made, {
      replicates: { spiked: 3 },
      spikes: { [entry.id]: 10 },
      calibrationSetId: set.id
    });
    const stored = await makeStoredImport(actor, made.study, [
      // Levels of 1, 2, 5, 10, 20 ng/mL at 1000 per ng/mL.
      ...levels.map((level, index) => ({
        calibrationSetId: set.id,
        levelId: level.id,
        analyteId: entry.analyteId,
        reported: 1000 * [1, 2, 5, 10, 20][index]!
      })),
      // 4000 and its like in 2 mL: 4 ng/mL, 8 ng, 80 %.
      ...amounts(experiment, entry, 0, [4000, 4500, 5000], { basis: 'area', finalVolumeMl: 2 })
    ]);

    const recovery = await provenanceView(actor, code, `recovery:1:${entry.id}`, asAddress);
    expect(recovery.figure).toMatchObject({ value: '90.0', unit: '%', n: '3' });
    const next = recovery.tables[0]?.rows[0]?.cells[0];
    expect(next?.text).toBe('80.0');
    const amount = await provenanceView(actor, code, next?.href ?? '', asAddress);
    expect(amount.figure).toMatchObject({ value: '8.000', unit: 'ng' });
    expect(amount.reading).toBe('m = x · DF · V / a');
    expect(amount.inputs.map((item) => [item.label.split(',')[0], item.value])).toEqual([
      ['Area', '4000'],
      ['Concentration in the vial', '4'],
      ['Dilution of the vial', '1'],
      ['Final volume', '2'],
      ['Share of the fraction in the extract', '1'],
      // Five levels before it, two other portions after it.
      ['Place in its sequence', '6 of 8']
    ]);
    // The factory writes row 2 and on, one number a row, into column 4: the sixth number stands in D7.
    expect(amount.cells).toEqual([
      {
        fileName: stored.fileName,
        sheet: 'Areas',
        cell: 'D7',
        rawText: '4000',
        sha256: stored.sha256,
        href: `/studies/${code}/data/${stored.id}?sheet=0&fromRow=2`
      }
    ]);
    const line = await provenanceView(actor, code, amount.inputs[1]?.href ?? '', asAddress);
    expect(line.title).toBe('Diuron, calibration');
    expect(line.cells.map((cell) => cell.cell)).toEqual(['D2', 'D3', 'D4', 'D5', 'D6']);
  });
});

describe('the validation summary', () => {
  it('says the same on the page and in the workbook, and labels invented data', async () => {
    const demoActor = await makeMember({ lab: await makeLab({ isDemo: true }) });
    actor = demoActor;
    made = await makeStudy(actor);
    code = made.study.code;
    const entry = await makePanelEntry(made.study, { name: 'Carbamazepine' });
    const experiment = await makeExperiment(made, { replicates: { spiked: 5 }, spikes: { [entry.id]: 100 } });
    await makeStoredImport(actor, made.study, amounts(experiment, entry, 0, [81, 83, 85, 87, 89.5]));

    const page = await summaryView(actor, code, asAddress);
    const exported = await exportedSummary(actor, code, 'https://lab.test');
    expect(exported.hash).toBe(page.hash);

    const chunks: Buffer[] = [];
    for await (const chunk of summaryWorkbook(exported, 'https://lab.test', {
      by: actor.name,
      at: new Date(0)
    })) {
      chunks.push(Buffer.from(chunk as Uint8Array));
    }
    const book = new ExcelJS.Workbook();
    await book.xlsx.load(Buffer.concat(chunks) as unknown as ArrayBuffer);
    expect(book.worksheets.map((sheet) => sheet.name)).toContain('Results');
    for (const sheet of book.worksheets) {
      expect(sheet.getCell('A2').value).toBe('Invented demo data: no laboratory measured these figures');
    }
    const results = book.getWorksheet('Results')!;
    const heads = (results.getRow(6).values as string[]).slice(1);
    const figures = (results.getRow(7).values as unknown[]).slice(1);
    const cell = (head: string): unknown => figures[heads.indexOf(head)];
    // (81 + 83 + 85 + 87 + 89.5)/5 = 85.1, unrounded in the file.
    expect(cell('Mean, %')).toBeCloseTo(85.1, 12);
    expect(cell('Verdict')).toBe(page.findings[0]?.results.rows[0]?.verdict);
    expect(cell('Analyte')).toMatchObject({
      text: 'Carbamazepine',
      hyperlink: `https://lab.test/studies/${code}/summary?figure=recovery:1:${entry.id}`
    });
  });

  it('names deviations, exclusions and gaps first', async () => {
    const entry = await makePanelEntry(made.study, { name: 'Phenol' });
    const experiment = await makeExperiment(made, { replicates: { spiked: 5 }, spikes: { [entry.id]: 100 } });
    await makeStoredImport(actor, made.study, amounts(experiment, entry, 0, [41, 42, 43, 44, 45]));
    await exclude(actor, code, 1, {
      replicateId: experiment.replicates[0]!.id,
      fractionId: null,
      analyteId: entry.analyteId,
      cause: 'peak cut off'
    });
    const summary = await summaryView(actor, code, asAddress);
    const items = new Map(summary.lookAt.map((part) => [part.title, part.items.map((item) => item.text)]));
    // Four counted portions are fewer than the five that the criteria ask for.
    expect(items.get('Gaps')?.join()).toContain('n 4 < 5');
    expect(items.get('Exclusions')).toEqual([expect.stringContaining('S1, Phenol: peak cut off')]);
    expect(summary.exclusions).toEqual([
      expect.objectContaining({ what: 'S1, Phenol', cause: 'peak cut off', lifted: null })
    ]);
  });
});
