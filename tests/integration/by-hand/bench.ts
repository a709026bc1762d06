import ExcelJS from 'exceljs';
import type { WrittenRule } from '../../../src/lib/domain/criteria';
import type { Actor } from '../../../src/lib/domain/actor';
import { calibrationSetForm } from '../../../src/lib/schemas/calibration';
import { experimentForm } from '../../../src/lib/schemas/experiment';
import type { PanelRole } from '../../../src/lib/domain/vocabulary';
import type { PanelEntry } from '../../../src/lib/server/db/models/panel-entry';
import { createCalibrationSet } from '../../../src/lib/server/services/calibrations';
import { createExperiment, getExperiment } from '../../../src/lib/server/services/experiments';
import { storeImport } from '../../../src/lib/server/services/import-storing';
import { receiveFile } from '../../../src/lib/server/services/imports';
import { getPanel } from '../../../src/lib/server/services/panels';
import { massBalanceView, provenanceView, resultsTableView } from '../../../src/lib/server/services/results';
import type { ResultRow } from '../../../src/lib/views/findings';
import type { MassBalanceRow } from '../../../src/lib/views/mass-balance';
import type { ProvenanceView } from '../../../src/lib/views/provenance';
import { makeCriteriaSet, makeRule } from '../../factories/criteria-set';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStudy, type MadeStudy } from '../../factories/study';

export type Row = readonly (string | number | null)[];
type Typed = Readonly<Record<string, unknown>>;

/** A study that is filled as a laboratory fills it: forms as they are typed, files as they are uploaded. */
export interface Bench {
  readonly actor: Actor;
  readonly made: MadeStudy;
  readonly code: string;
  readonly entry: (name: string, role?: PanelRole, standard?: PanelEntry) => Promise<PanelEntry>;
  readonly calibration: (typed: Typed) => Promise<string>;
  /** @returns the experiment's number */
  readonly experiment: (typed: Typed) => Promise<number>;
  /** Uploads a text file parted by semicolons and stores it. @returns the import */
  readonly upload: (rows: readonly Row[], options?: UploadOptions) => Promise<string>;
  readonly uploadBook: (
    sheets: Readonly<Record<string, readonly Row[]>>,
    options?: UploadOptions
  ) => Promise<string>;
  /** A row of the results, with the notes that are common to all. */
  readonly result: (experiment: number, name: string) => Promise<ResultRow>;
  readonly balance: (experiment: number, name: string) => Promise<MassBalanceRow>;
  readonly provenance: (experiment: number, entry: PanelEntry) => Promise<ProvenanceView>;
  /** Ids of the panel entries, in panel order. */
  readonly panel: () => Promise<readonly string[]>;
  /** Replicate ids by label and fraction ids by name. */
  readonly places: (experiment: number) => Promise<Places>;
}

export interface Places {
  readonly replicates: ReadonlyMap<string, string>;
  readonly fractions: ReadonlyMap<string, string>;
}

interface UploadOptions {
  readonly experiment?: number;
  /** Takes open questions as they stand. */
  readonly confirmed?: boolean;
  readonly reason?: string;
}

/** @param rules criteria in place of the usual ones (mean 70 to 130 %, RSD 20 %, five preparations) */
export async function openBench(rules: readonly Partial<WrittenRule>[] = []): Promise<Bench> {
  const actor = await makeMember({ role: 'chemist' });
  const made = await makeStudy(actor);
  const { code } = made.study;
  if (rules.length > 0) {
    const own = await makeCriteriaSet(actor.labId, { rules: rules.map((rule) => makeRule(rule)) });
    await made.study.update({ criteriaSetId: own.id, criteriaSetVersionId: own.versionId });
  }
  let files = 0;

  async function store(fileName: string, bytes: Buffer, options: UploadOptions): Promise<string> {
    const experimentNumber = options.experiment ?? null;
    const { importId } = await receiveFile(actor, code, { fileName, bytes, experimentNumber });
    await storeImport(actor, code, importId, {
      questionsConfirmed: options.confirmed ?? false,
      reason: options.reason ?? ''
    });
    return importId;
  }

  return {
    actor,
    made,
    code,
    entry: (name, role = 'target', standard) =>
      makePanelEntry(made.study, {
        name,
        role,
        ...(standard ? { internalStandardEntryId: standard.id } : {})
      }),
    calibration: (typed) =>
      createCalibrationSet(
        actor,
        code,
        calibrationSetForm.parse({
          name: 'Standards',
          instrument: 'Instrument 1',
          calibratedOn: '2026-03-02',
          defaultModel: 'average response factor',
          defaultWeighting: 'none',
          ...typed
        })
      ),
    experiment: (typed) =>
      createExperiment(
        actor,
        code,
        experimentForm.parse({
          stageKey: 'extraction',
          title: 'Invented by hand',
          medium: 'sample matrix',
          matrix: 'river water',
          levelLabel: 'one level',
          subtract: 'none',
          fractions: [{ name: 'Elution', kind: 'elution', countsAs: 'method' }],
          ...typed
        })
      ),
    upload: (rows, options = {}) => {
      files += 1;
      const text = rows.map((row) => row.map((cell) => cell ?? '').join(';')).join('\n');
      return store(`file ${files}.csv`, Buffer.from(text, 'utf8'), options);
    },
    uploadBook: async (sheets, options = {}) => {
      files += 1;
      const book = new ExcelJS.Workbook();
      for (const [name, rows] of Object.entries(sheets)) {
        const sheet = book.addWorksheet(name);
        for (const row of rows) sheet.addRow([...row]);
      }
      return store(`file ${files}.xlsx`, Buffer.from(await book.xlsx.writeBuffer()), options);
    },
    result: async (experiment, name) => {
      const { results } = await resultsTableView(actor, code, { experiment }, (address) => address);
      const row = named(results?.rows ?? [], name);
      return { ...row, notes: [...row.notes, ...(results?.notes ?? [])] };
    },
    balance: async (experiment, name) => {
      const { balance } = await massBalanceView(actor, code, { experiment }, (address) => address);
      return named(balance.rows, name);
    },
    provenance: (experiment, entry) =>
      provenanceView(actor, code, `recovery:${experiment}:${entry.id}`, (address) => address),
    panel: async () => (await getPanel(actor, code)).map(({ id }) => id),
    places: async (experiment) => {
      const view = await getExperiment(actor, code, experiment);
      return {
        replicates: new Map(view.replicates.map(({ label, id }) => [label, id])),
        fractions: new Map(view.fractions.map(({ name, id }) => [name, id]))
      };
    }
  };
}

function named<Item extends { readonly name: string }>(rows: readonly Item[], name: string): Item {
  const found = rows.find((row) => row.name === name);
  if (!found) throw new Error(`no row of ${name}`);
  return found;
}

/** A group of preparations as it is typed. */
export function portions(kind: string, labels: readonly string[], more: Typed = {}): Typed {
  return { kind, count: labels.length, labels: labels.join('\n'), ...more };
}
