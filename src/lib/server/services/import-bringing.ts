import { createHash } from 'node:crypto';
import type { Actor } from '../../domain/actor';
import type { ColumnMap } from '../../schemas/column-map';
import type { ImportParameters } from '../../schemas/api/import-parameters';
import type {
  BroughtFileView,
  FileProblemView,
  ImportDetailView,
  ImportFacts
} from '../../views/brought-files';
import type { ImportListView } from '../../views/imports';
import type { Import } from '../db/models/import';
import type { Study } from '../db/models/study';
import { inTransaction } from '../db/transaction';
import { Conflict, FileProblems, Invalid, TooLarge, Unsupported } from '../errors';
import { readingLimits } from '../imports/limits';
import { recogniseFile } from '../imports/recognise-file';
import { Refusal } from '../imports/refusal';
import { codeForPrograms, standingOfFile } from './import-standing';
import { storeImport } from './import-storing';
import { declareAboutImport, importOfStudy, listedImport, receiveFile, sameBytes } from './imports';
import { keptMapNamed } from './kept-maps';
import { require } from './permissions';
import { studyOf } from './study-of';

/** A file as a program sent it. */
export interface SentFile {
  readonly fileName: string;
  readonly bytes: Buffer;
}

/**
 * Brings a data file in for a program, by the same steps as the page: it is kept, read, checked, and stored whole when nothing
 * stands against it. The very bytes that are stored already change nothing, however often and at how many places at once they
 * are sent.
 *
 * @returns `stored`; `received` with what has to be answered first (or because no storing was asked for); `known`
 * @throws FileProblems naming every problem with sheet and cell; Unsupported for what is no table at all; TooLarge; Invalid for
 *   a parameter; Conflict when the study is not open; NotFound; Forbidden
 */
export async function bringFile(
  actor: Actor,
  studyCode: string,
  file: SentFile,
  parameters: ImportParameters
): Promise<BroughtFileView> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, studyCode);
  requireTable(file);
  const map = await namedMap(actor, parameters);
  const sha256 = createHash('sha256').update(file.bytes).digest('hex');
  const stored = await sameBytes(actor, study, sha256);
  if (stored?.state === 'stored') return knownAlready(actor, study, stored.id);

  const received = await inTransaction(actor, { study: study.id }, async () => {
    const kept = await receiveFile(actor, studyCode, {
      ...file,
      experimentNumber: parameters.experiment ?? null
    });
    if (!kept.storedBefore) {
      await declareAboutImport(actor, studyCode, kept.importId, {
        basis: parameters.basis ?? null,
        decimal: parameters.decimal ?? null,
        ...(map === null ? {} : { map })
      });
    }
    return kept;
  });
  if (received.storedBefore) return knownAlready(actor, study, received.importId);
  const kept = await importOfStudy(actor, study, received.importId);
  if (!parameters.store) return answerUnstored(actor, study, kept, parameters);
  const first = await store(actor, study, kept, parameters);
  if (!(first instanceof Invalid)) return first;
  const answer = await answerUnstored(actor, study, kept, parameters);
  if (answer.questions.length > 0) return answer;
  // What stood against it is gone at a second look, such as a reading that was ended from outside.
  const second = await store(actor, study, kept, parameters);
  if (second instanceof Invalid) throw second;
  return second;
}

/** @returns what came of it, or what kept the file from being stored */
async function store(
  actor: Actor,
  study: Study,
  kept: Import,
  { confirm, reason }: ImportParameters
): Promise<BroughtFileView | Invalid> {
  try {
    await storeImport(actor, study.code, kept.id, {
      questionsConfirmed: (code) => confirm.includes(codeForPrograms(code)),
      reason
    });
  } catch (refusal) {
    if (refusal instanceof Invalid) return refusal;
    if (!(refusal instanceof Conflict)) throw refusal;
    // Sent twice at the same moment: the other one stored it.
    const now = await sameBytes(actor, study, kept.sha256);
    if (now?.state === 'stored') return knownAlready(actor, study, now.id);
    throw refusal;
  }
  const facts = factsOf(await listedImport(actor, study, kept.id));
  return { outcome: 'stored', import: facts, questions: [], notes: [] };
}

/** One import of a study; while it waits, with everything that stands between it and its being stored. @throws NotFound */
export async function importDetail(
  actor: Actor,
  studyCode: string,
  importId: string
): Promise<ImportDetailView> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, studyCode);
  const kept = await importOfStudy(actor, study, importId);
  return {
    import: factsOf(await listedImport(actor, study, kept.id)),
    problems: kept.state === 'received' ? await standingOfFile(study, kept) : []
  };
}

/** An import as programs see it: what the person may do with it on the page is not their concern. */
export function factsOf({ mayWithdraw: _, ...facts }: ImportListView): ImportFacts {
  return facts;
}

/** The column map that was asked for; null: none was. @throws Invalid for one that the lab does not have */
async function namedMap(actor: Actor, parameters: ImportParameters): Promise<ColumnMap | null> {
  const { map: name, mapVersion: version } = parameters;
  if (name === undefined) {
    if (version === undefined) return null;
    throw Invalid.at('mapVersion', 'Name the column map whose version this is.', { expected: 'map=…' });
  }
  const kept = await keptMapNamed(actor.labId, name, version ?? null);
  if (kept) return kept.map;
  throw Invalid.at(
    'map',
    `This lab has no column map called "${name}"${version === undefined ? '' : ` with a version ${version}`}.`,
    {
      found: name,
      expected: 'the name of a saved column map, or none: then the layout is recognised by its header'
    }
  );
}

/** What its first bytes give away as no table is not even kept. */
function requireTable({ fileName, bytes }: SentFile): void {
  try {
    recogniseFile(bytes, readingLimits);
  } catch (refusal) {
    if (!(refusal instanceof Refusal)) throw refusal;
    if (refusal.code === 'empty') throw Invalid.at('file', refusal.message, { found: '0 bytes' });
    if (refusal.code === 'too large') throw new TooLarge(`${fileName}: ${refusal.message}`);
    throw new Unsupported(`${fileName}: ${refusal.message}`);
  }
}

async function knownAlready(actor: Actor, study: Study, importId: string): Promise<BroughtFileView> {
  const facts = factsOf(await listedImport(actor, study, importId));
  return { outcome: 'known', import: facts, questions: [], notes: [] };
}

/** @throws FileProblems when something in the file has to be mended */
async function answerUnstored(
  actor: Actor,
  study: Study,
  kept: Import,
  { confirm, reason }: ImportParameters
): Promise<BroughtFileView> {
  const standing = await standingOfFile(study, kept);
  const of = (severity: FileProblemView['severity']): readonly FileProblemView[] =>
    standing.filter((problem) => problem.severity === severity);
  const errors = of('error');
  if (errors.length > 0) {
    throw new FileProblems(
      kept.id,
      standing,
      `${kept.fileName} was received and not stored: ${errors.length === 1 ? errors[0]?.message : `${errors.length} places need mending.`}`
    );
  }
  return {
    outcome: 'received',
    import: factsOf(await listedImport(actor, study, kept.id)),
    questions: of('question').filter(
      ({ code, answer }) =>
        !(answer === 'confirm' && confirm.includes(code)) &&
        !(answer === 'reason' && reason.trim().length >= 3)
    ),
    notes: of('note')
  };
}
