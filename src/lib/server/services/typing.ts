import { QueryTypes, Transaction } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { filledCells, laidOver, type TypedCells } from '../../domain/typed-cells';
import { reportedBasisLabels, type ReportedBasis } from '../../domain/vocabulary';
import type { TypingCheck, TypingRow, TypingView } from '../../views/typing';
import { Draft } from '../db/models/draft';
import { Experiment } from '../db/models/experiment';
import { Import } from '../db/models/import';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import { inTransaction } from '../db/transaction';
import { Invalid, NotFound } from '../errors';
import { mapInChild } from '../imports/read-in-child';
import { typedFile, type TypedFile } from '../imports/typed-file';
import type { Problem } from '../imports/types';
import { loadExpectation, nothingDeclared } from './import-expectation';
import { declareAboutImport, receiveFile } from './imports';
import { require } from './permissions';
import { studyKeys, studyOf } from './study-of';
import { gridColumns, gridRows, placed } from './typing-grid';

const draftSize = { cells: 60_000 } as const;

async function experimentOf(study: Study, number: number): Promise<Experiment> {
  const found = await Experiment.findOne({ where: { ...studyKeys(study), number } });
  if (!found) throw new NotFound('There is no such experiment in this study.');
  return found;
}

const keysOf = (actor: Actor, experiment: Experiment) => ({
  labId: actor.labId,
  studyId: experiment.studyId,
  experimentId: experiment.id,
  userId: actor.userId
});

/** A draft whose import is stored has done its work; if that import is withdrawn, it can be typed on. */
async function draftOf(
  actor: Actor,
  experiment: Experiment
): Promise<{ draft: Draft | null; waiting: boolean }> {
  const draft = await Draft.findOne({ where: keysOf(actor, experiment) });
  if (!draft?.importId) return { draft, waiting: false };
  const handedOn = await Import.findByPk(draft.importId, { attributes: ['state'] });
  const done = handedOn?.state === 'stored' || handedOn?.state === 'superseded';
  return { draft: done ? null : draft, waiting: handedOn?.state === 'received' };
}

/** The grid as it is laid out now, with those cells of a draft that have a place in it. */
async function gridOf(study: Study, experiment: Experiment, draft: Draft | null) {
  const basis: ReportedBasis = draft?.basis ?? 'area';
  const injections = draft?.injections ?? 1;
  const expectation = await loadExpectation(studyKeys(study), {
    ...nothingDeclared,
    experimentId: experiment.id,
    basis
  });
  const rows = gridRows(expectation, experiment, injections);
  const columns = gridColumns(expectation, basis);
  return { basis, injections, expectation, rows, columns, ...placed(draft?.cells ?? {}, rows, columns) };
}

async function storedValues(experiment: Experiment): Promise<TypingView['stored']> {
  const [row] = await sequelize.query<{ values: number; by: string; at: Date }>(
    `SELECT count(*)::int AS values, (array_agg(u.name ORDER BY i.stored_order DESC))[1] AS by, max(i.stored_at) AS at
      FROM measurements m JOIN imports i ON i.id = m.import_id AND i.state = 'stored' JOIN users u ON u.id = i.stored_by
      WHERE m.experiment_id = $1 AND m.lab_id = $2 HAVING count(*) > 0`,
    { bind: [experiment.id, experiment.labId], type: QueryTypes.SELECT }
  );
  return row ? { values: row.values, by: row.by, at: row.at.toISOString() } : null;
}

/**
 * The grid in which the values of an experiment are typed, with what this person has typed so far.
 * @throws NotFound, Forbidden
 */
export async function typingGrid(actor: Actor, code: string, number: number): Promise<TypingView> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, code);
  const experiment = await experimentOf(study, number);
  const { draft, waiting } = await draftOf(actor, experiment);
  const { basis, injections, rows, columns, cells, without } = await gridOf(study, experiment, draft);
  return {
    experiment: { number: experiment.number, title: experiment.title },
    basis,
    injections,
    rows,
    columns,
    cells,
    keptAt: draft?.updatedAt.toISOString() ?? null,
    withoutPlace: without,
    stored: await storedValues(experiment),
    waiting: waiting ? (draft?.importId ?? null) : null
  };
}

/** Changes the draft of this person under its lock, so that two windows of one person lose nothing of each other. */
async function changeDraft(
  actor: Actor,
  code: string,
  number: number,
  change: (draft: Draft) => Partial<Pick<Draft, 'cells' | 'basis' | 'injections' | 'importId'>>
): Promise<Draft> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, code);
  const experiment = await experimentOf(study, number);
  // A draft is no content of the study yet: neither its data version nor its history moves.
  return inTransaction(actor, {}, async () => {
    const where = keysOf(actor, experiment);
    await Draft.bulkCreate([where], { ignoreDuplicates: true });
    const found = await Draft.findOne({ where, lock: Transaction.LOCK.UPDATE });
    if (!found) throw new NotFound();
    const { draft } = await draftOf(actor, experiment);
    if (!draft) found.set({ cells: {}, importId: null });
    found.set(change(found));
    found.changed('updatedAt', true);
    return found.save();
  });
}

/**
 * Keeps cells as they were typed, beside those kept before; an empty text takes one back.
 * @returns when it was kept, ISO 8601 @throws NotFound, Forbidden, Invalid for more than a grid can hold
 */
export async function keepTyped(
  actor: Actor,
  code: string,
  number: number,
  cells: TypedCells
): Promise<string> {
  const kept = await changeDraft(actor, code, number, (draft) => {
    const next = filledCells(laidOver(draft.cells, cells));
    const count = Object.values(next).reduce((sum, row) => sum + Object.keys(row).length, 0);
    if (count > draftSize.cells) {
      throw Invalid.at(
        'cells',
        `A grid keeps at most ${draftSize.cells} cells. Bring this much with a file.`
      );
    }
    return { cells: next };
  });
  return kept.updatedAt.toISOString();
}

/** Says what the typed numbers are and how many injections the grid has rows for. Nothing typed is dropped. */
export async function planTyping(
  actor: Actor,
  code: string,
  number: number,
  plan: Readonly<{ basis: ReportedBasis; injections: number }>
): Promise<void> {
  await changeDraft(actor, code, number, () => plan);
}

/** Empties the grid. @throws NotFound, Forbidden */
export async function discardTyped(actor: Actor, code: string, number: number): Promise<void> {
  require(actor, 'data.enter');
  const experiment = await experimentOf(await studyOf(actor, code), number);
  await inTransaction(actor, {}, async () => {
    await Draft.destroy({ where: keysOf(actor, experiment) });
  });
}

/** Problems of the file that was typed, told at the cells of the grid. */
function atCells(problems: readonly Problem[], { places }: TypedFile): TypingCheck {
  const errors: Record<string, string> = {};
  const other: string[] = [];
  for (const problem of problems) {
    if (problem.severity !== 'error') continue;
    const place = problem.cell === null ? undefined : places.get(problem.cell);
    if (place === undefined) other.push(`${problem.message} ${problem.fix}`);
    else errors[place] ??= `holds “${problem.found.replace(/^“|”$/g, '')}”, expected ${problem.expected}.`;
  }
  return { errors, other };
}

const atFormulas = (rows: readonly TypingRow[], cells: TypedCells): Record<string, string> =>
  Object.fromEntries(
    rows.flatMap(({ key }) =>
      Object.entries(cells[key] ?? {}).flatMap(([column, text]) =>
        text.startsWith('=')
          ? [[`${key}:${column}`, `holds “${text}”, expected a value. Type what the formula gives.`]]
          : []
      )
    )
  );

export type HandedOn =
  | { readonly kind: 'mend'; readonly check: TypingCheck }
  | { readonly kind: 'received'; readonly importId: string; readonly storedBefore: boolean };

/**
 * Checks what was typed as a file would be checked. Errors come back by cell; without any, what was typed is received as an import,
 * to be looked at and stored like every other.
 * @throws NotFound, Forbidden, Invalid when nothing was typed, Conflict for a study that is not open
 */
export async function handOnTyped(actor: Actor, code: string, number: number): Promise<HandedOn> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, code);
  const experiment = await experimentOf(study, number);
  const { draft } = await draftOf(actor, experiment);
  const { basis, expectation, rows, columns, cells } = await gridOf(study, experiment, draft);
  const file = typedFile(rows, columns, cells, basis);
  if (!draft || !file) {
    throw Invalid.at('cells', 'Nothing is typed yet: type or paste the values first.', {
      found: 'no value',
      expected: reportedBasisLabels[basis]
    });
  }
  const formulas = atFormulas(rows, cells);
  if (Object.keys(formulas).length > 0) return { kind: 'mend', check: { errors: formulas, other: [] } };
  const { mapped } = await mapInChild(file.bytes, expectation);
  const check = atCells(mapped.problems, file);
  if (Object.keys(check.errors).length + check.other.length > 0) return { kind: 'mend', check };

  return inTransaction(actor, { study: study.id }, async () => {
    const received = await receiveFile(actor, study.code, {
      fileName: `typed-experiment-${experiment.number}.csv`,
      bytes: file.bytes,
      experimentNumber: experiment.number
    });
    const storedBefore = received.storedBefore !== null;
    if (!storedBefore)
      await declareAboutImport(actor, study.code, received.importId, { basis, decimal: null });
    await changeDraft(actor, study.code, number, () => ({ importId: received.importId }));
    return { kind: 'received', importId: received.importId, storedBefore };
  });
}
