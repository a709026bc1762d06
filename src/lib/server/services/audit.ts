import { col, fn, Op, where as compare, type WhereOptions } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { HistoryFilter } from '../../schemas/history';
import type { HistoryChoices, HistoryEvent, HistoryPage } from '../../views/history';
import { AuditEvent } from '../db/models/audit-event';
import { Study } from '../db/models/study';
import { namesOfIds, withNames } from './history-names';
import { require } from './permissions';
import { studyOf } from './study-of';

const pageSize = 50;

const likeEscaped = (text: string): string => text.replace(/[\\%_]/g, (character) => `\\${character}`);

/** Days are days in UTC, both ends included. */
function conditions(actor: Actor, studyId: string | null, filter: HistoryFilter): WhereOptions {
  const all: WhereOptions[] = [{ labId: actor.labId }];
  if (studyId) all.push({ studyId });
  if (filter.actor) all.push({ actorId: filter.actor });
  if (filter.entity) all.push({ entity: filter.entity });
  if (filter.text) all.push({ sentence: { [Op.iLike]: `%${likeEscaped(filter.text)}%` } });
  if (filter.from) all.push({ at: { [Op.gte]: new Date(`${filter.from}T00:00:00Z`) } });
  if (filter.to) {
    const end = new Date(`${filter.to}T00:00:00Z`);
    end.setUTCDate(end.getUTCDate() + 1);
    all.push({ at: { [Op.lt]: end } });
  }
  if (filter.before) all.push({ seq: { [Op.lt]: String(filter.before) } });
  return { [Op.and]: all };
}

function eventView(
  event: AuditEvent,
  codes: ReadonlyMap<string, string>,
  names: ReadonlyMap<string, string>
): HistoryEvent {
  return {
    seq: Number(event.seq),
    at: event.at.toISOString(),
    actorName: event.actorName,
    action: event.action,
    entity: event.entity,
    studyCode: event.studyId ? (codes.get(event.studyId) ?? null) : null,
    sentence: event.sentence,
    reason: event.reason,
    before: withNames(event.before ?? null, names),
    after: withNames(event.after ?? null, names),
    hash: event.hash
  };
}

async function choicesOf(actor: Actor, studyId: string | null): Promise<HistoryChoices> {
  const where = { labId: actor.labId, ...(studyId ? { studyId } : {}) };
  const people = (await AuditEvent.findAll({
    attributes: ['actorId', [fn('max', col('actor_name')), 'actorName']],
    where: { ...where, actorId: { [Op.ne]: null } },
    group: ['actorId'],
    raw: true
  })) as unknown as { actorId: string; actorName: string }[];
  const entities = await AuditEvent.findAll({ attributes: ['entity'], where, group: ['entity'], raw: true });
  return {
    people: people
      .map(({ actorId, actorName }) => ({ id: actorId, name: actorName }))
      .sort((a, b) => a.name.localeCompare(b.name)),
    entities: entities.map(({ entity }) => entity).sort()
  };
}

/**
 * Who did what and when, newest first: of one study, or of the whole lab (lab managers only, since it also tells about
 * members). Pages on by `filter.before`.
 * @throws Forbidden, NotFound
 */
export async function listHistory(
  actor: Actor,
  input: Readonly<{ study: string | null; filter: HistoryFilter }>
): Promise<HistoryPage> {
  require(actor, input.study === null ? 'lab.settings' : 'studies.see');
  const study = input.study === null ? null : await studyOf(actor, input.study);
  const found = await AuditEvent.findAll({
    where: conditions(actor, study?.id ?? null, input.filter),
    order: [['seq', 'DESC']],
    limit: pageSize + 1
  });
  const events = found.slice(0, pageSize);
  const ids = [...new Set(events.map(({ studyId }) => studyId).filter((id) => id !== null))];
  const studies = await Study.findAll({ where: { labId: actor.labId, id: ids }, attributes: ['id', 'code'] });
  const codes = new Map(studies.map(({ id, code }) => [id, code]));
  const names = await namesOfIds(
    actor.labId,
    events.flatMap(({ before, after }) => [before, after])
  );
  return {
    events: events.map((event) => eventView(event, codes, names)),
    older: found.length > pageSize ? Number(events.at(-1)?.seq) : null,
    choices: await choicesOf(actor, study?.id ?? null)
  };
}

/** When something last happened in each study, ISO 8601. */
export async function lastEventOf(
  actor: Actor,
  studyIds: readonly string[]
): Promise<ReadonlyMap<string, string>> {
  const rows = (await AuditEvent.findAll({
    attributes: ['studyId', [fn('max', col('at')), 'at']],
    where: { [Op.and]: [{ labId: actor.labId }, compare(col('study_id'), { [Op.in]: [...studyIds] })] },
    group: ['studyId'],
    raw: true
  })) as unknown as { studyId: string; at: Date }[];
  return new Map(rows.map(({ studyId, at }) => [studyId, at.toISOString()]));
}
