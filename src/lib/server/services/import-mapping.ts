import type { Actor } from '../../domain/actor';
import { columnMap } from '../../schemas/column-map';
import { Import } from '../db/models/import';
import type { Study } from '../db/models/study';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid } from '../errors';
import { changedMap, type MapChange } from '../imports/change-map';
import { originalText, withMends, type CellMend } from '../imports/mends';
import { readInChild } from '../imports/read-in-child';
import type { Assignment, Expectation } from '../imports/types';
import { declaredOf, type Declared } from './import-expectation';
import { readKeptFile, type FileRead } from './import-reading';
import { bytesOf, importOfStudy } from './imports';
import { require } from './permissions';
import { studyOf } from './study-of';

/* How a file that waits to be stored is read: every change is kept with the import, and the file itself stays as it came. */

const mostMends = 500;

interface Waiting {
  readonly study: Study;
  readonly kept: Import;
  readonly declared: Declared;
}

async function waitingImport(actor: Actor, studyCode: string, importId: string): Promise<Waiting> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, studyCode);
  const kept = await importOfStudy(actor, study, importId);
  if (kept.state !== 'received') throw new Conflict('This file is no longer waiting to be stored.');
  return { study, kept, declared: declaredOf(kept.declared) };
}

/** Keeps a declaration under the lock of its row, so that two people who change different things lose nothing of each other. */
async function declare(
  actor: Actor,
  { study, kept }: Waiting,
  change: (now: Declared) => Partial<Declared>,
  write: () => void = () => undefined
): Promise<void> {
  await inTransaction(actor, { study: study.id }, async (transaction) => {
    const locked = await Import.findOne({
      where: { id: kept.id, labId: actor.labId, state: 'received' },
      attributes: ['id', 'labId', 'declared'],
      lock: transaction.LOCK.UPDATE
    });
    if (!locked) throw new Conflict('This file is no longer waiting to be stored.');
    const now = declaredOf(locked.declared);
    await Import.update(
      { declared: { ...now, ...change(now) } },
      { where: { id: kept.id, labId: actor.labId } }
    );
    write();
  });
}

async function readNow({ study, kept }: Waiting): Promise<FileRead> {
  const reading = await readKeptFile(study, kept);
  if (reading.kind === 'refused') throw Invalid.at('file', reading.sentence);
  return reading;
}

/**
 * Changes how a waiting file is read: what a column means, where the header stands, which sheets are read, how labels are taken apart.
 * @throws Invalid for a sheet or column that the file does not have; Conflict when it is no longer waiting; NotFound; Forbidden
 */
export async function changeMap(
  actor: Actor,
  studyCode: string,
  importId: string,
  change: MapChange
): Promise<void> {
  const waiting = await waitingImport(actor, studyCode, importId);
  const { workbook, mapped, expectation } = await readNow(waiting);
  let next;
  try {
    next = columnMap.parse(changedMap(mapped.map, change, workbook, expectation));
  } catch (error) {
    if (error instanceof RangeError) throw Invalid.at('sheet', error.message);
    throw error;
  }
  await declare(actor, waiting, () => ({ map: next }));
}

/** Reads the file as it is recognised again, or as a kept map has it. */
export async function resetMap(actor: Actor, studyCode: string, importId: string): Promise<void> {
  const waiting = await waitingImport(actor, studyCode, importId);
  await declare(actor, waiting, () => ({ map: null, assignments: {} }));
}

/** @throws Invalid for a place that the study does not have */
function assignmentOf(
  choice: string,
  fractionId: string | null,
  { experiments, calibrationSets }: Expectation
): Assignment | null {
  if (choice === '') return null;
  if (choice === 'left out') return { kind: 'left out' };
  const [kind, id = ''] = choice.split(' ');
  const experiment = experiments.find(({ replicates }) => replicates.some((each) => each.id === id));
  if (kind === 'replicate' && experiment) {
    const isKnown =
      fractionId === null || experiment.fractions.some((fraction) => fraction.id === fractionId);
    if (!isKnown) throw Invalid.at('fraction', `${experiment.title} has no such fraction.`);
    return { kind, experimentId: experiment.id, replicateId: id, fractionId };
  }
  if (kind === 'level' && calibrationSets.some(({ levels }) => levels.some((level) => level.id === id)))
    return { kind, levelId: id };
  if (kind === 'check' && calibrationSets.some(({ checks }) => checks.some((check) => check.id === id)))
    return { kind, checkStandardId: id };
  throw Invalid.at('place', 'This study has no such portion, level or check.');
}

/** Says what a sample label of the file means, or takes that back. @throws Invalid, Conflict, NotFound, Forbidden */
export async function assignLabel(
  actor: Actor,
  studyCode: string,
  importId: string,
  input: Readonly<{ label: string; place: string; fraction: string | null }>
): Promise<void> {
  const waiting = await waitingImport(actor, studyCode, importId);
  const { expectation } = await readNow(waiting);
  const assignment = assignmentOf(input.place, input.fraction, expectation);
  await declare(actor, waiting, ({ assignments }) => {
    const { [input.label]: _, ...others } = assignments;
    return { assignments: assignment ? { ...others, [input.label]: assignment } : others };
  });
}

/**
 * Reads one cell otherwise than it stands in the file. What stands there is kept beside it, and who mended it goes on record.
 * @throws Invalid for a cell that is not in the file, or more mends than are sensible; Conflict; NotFound; Forbidden
 */
export async function mendCell(
  actor: Actor,
  studyCode: string,
  importId: string,
  input: Readonly<{ sheet: string; cell: string; text: string }>
): Promise<void> {
  const waiting = await waitingImport(actor, studyCode, importId);
  const cell = input.cell.toUpperCase();
  const file = await readInChild(await bytesOf(waiting.kept.id));
  let mend: CellMend;
  try {
    mend = {
      sheet: input.sheet,
      cell,
      text: input.text.trim(),
      original: originalText(file, input.sheet, cell)
    };
    withMends(file, [mend]);
  } catch (error) {
    if (error instanceof RangeError) throw Invalid.at('cell', error.message, { found: cell });
    throw error;
  }
  const isOther = (each: CellMend): boolean => each.sheet !== mend.sheet || each.cell !== mend.cell;
  await declare(
    actor,
    waiting,
    ({ mends }) => {
      if (mends.length >= mostMends) {
        throw Invalid.at(
          'cell',
          `More than ${mostMends} cells are mended already: correct the file and bring it again.`
        );
      }
      return { mends: [...mends.filter(isOther), mend] };
    },
    () =>
      audit({
        action: 'mended',
        entity: 'import',
        entityId: waiting.kept.id,
        studyId: waiting.study.id,
        sentence: `${mend.sheet}, ${mend.cell} of ${waiting.kept.fileName} is read as ${quoted(mend.text)} in place of ${quoted(mend.original)}.`,
        before: { cell: mend.original },
        after: { cell: mend.text }
      })
  );
}

const quoted = (text: string): string => (text === '' ? 'blank' : `“${text}”`);

/** Reads a mended cell as it stands in the file again. */
export async function unmendCell(
  actor: Actor,
  studyCode: string,
  importId: string,
  input: Readonly<{ sheet: string; cell: string }>
): Promise<void> {
  const waiting = await waitingImport(actor, studyCode, importId);
  const cell = input.cell.toUpperCase();
  await declare(
    actor,
    waiting,
    ({ mends }) => ({ mends: mends.filter((each) => each.sheet !== input.sheet || each.cell !== cell) }),
    () =>
      audit({
        action: 'mended',
        entity: 'import',
        entityId: waiting.kept.id,
        studyId: waiting.study.id,
        sentence: `${input.sheet}, ${cell} of ${waiting.kept.fileName} is read as it stands in the file again.`
      })
  );
}
