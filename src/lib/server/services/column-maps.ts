import { col, fn, Op, where as compare } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { columnMap } from '../../schemas/column-map';
import { ColumnMapRow } from '../db/models/column-map';
import { ColumnMapVersion } from '../db/models/column-map-version';
import { audit, inTransaction } from '../db/transaction';
import { Invalid, NotFound } from '../errors';
import { readKeptFile } from './import-reading';
import { importOfStudy } from './imports';
import { knownId } from './known-id';
import { require } from './permissions';
import { studyOf } from './study-of';

export interface ColumnMapListItem {
  readonly id: string;
  readonly name: string;
  readonly version: number;
  readonly savedAt: string;
  readonly isRetired: boolean;
}

/** The layouts that the lab keeps, by name. */
export async function listColumnMaps(actor: Actor): Promise<readonly ColumnMapListItem[]> {
  require(actor, 'studies.see');
  const rows = await ColumnMapRow.findAll({ where: { labId: actor.labId }, order: [['name', 'ASC']] });
  const versions = await ColumnMapVersion.findAll({
    where: { labId: actor.labId },
    attributes: ['columnMapId', 'version', 'createdAt'],
    order: [['version', 'DESC']]
  });
  return rows.flatMap(({ id, name, retiredAt }) => {
    const newest = versions.find(({ columnMapId }) => columnMapId === id);
    return newest
      ? [
          {
            id,
            name,
            version: newest.version,
            savedAt: newest.createdAt.toISOString(),
            isRetired: retiredAt !== null
          }
        ]
      : [];
  });
}

/**
 * Keeps how a file is read under a name, for the next file of its layout; under a known name as its next version.
 * @returns the version @throws Invalid for a file that cannot be read; NotFound; Forbidden
 */
export async function keepColumnMap(
  actor: Actor,
  studyCode: string,
  importId: string,
  name: string
): Promise<number> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, studyCode);
  const kept = await importOfStudy(actor, study, importId);
  const reading = await readKeptFile(study, kept);
  if (reading.kind === 'refused') throw Invalid.at('name', reading.sentence);
  const map = columnMap.parse(reading.mapped.map);
  if (map.tables.length === 0) {
    throw Invalid.at('name', 'Nothing of this file is read yet, so there is no layout to keep.');
  }
  return inTransaction(actor, {}, async (transaction) => {
    const where = {
      [Op.and]: [{ labId: actor.labId }, compare(fn('lower', col('name')), name.toLowerCase())]
    };
    const found = await ColumnMapRow.findOne({ where, lock: transaction.LOCK.UPDATE });
    const row = found ?? (await ColumnMapRow.create({ labId: actor.labId, name }));
    if (found?.retiredAt) await found.update({ retiredAt: null });
    const version =
      1 + (await ColumnMapVersion.count({ where: { labId: actor.labId, columnMapId: row.id } }));
    await ColumnMapVersion.create({
      labId: actor.labId,
      columnMapId: row.id,
      version,
      map,
      savedBy: actor.userId
    });
    audit({
      action: version === 1 ? 'created' : 'changed',
      entity: 'column map',
      entityId: row.id,
      studyId: null,
      sentence: `The layout ${row.name} was kept, version ${version}, as ${kept.fileName} is read.`,
      after: { name: row.name, version, tables: map.tables.length }
    });
    return version;
  });
}

/** Lets a kept layout no longer apply by itself, or lets it apply again. @throws NotFound, Forbidden */
export async function setColumnMapRetired(actor: Actor, mapId: string, isRetired: boolean): Promise<void> {
  require(actor, 'data.enter');
  await inTransaction(actor, {}, async (transaction) => {
    const row = await ColumnMapRow.findOne({
      where: { labId: actor.labId, id: knownId(mapId) },
      lock: transaction.LOCK.UPDATE
    });
    if (!row) throw new NotFound();
    if ((row.retiredAt !== null) === isRetired) return;
    await row.update({ retiredAt: isRetired ? new Date() : null });
    audit({
      action: isRetired ? 'retired' : 'changed',
      entity: 'column map',
      entityId: row.id,
      studyId: null,
      sentence: `The layout ${row.name} ${isRetired ? 'no longer applies' : 'applies again'} by itself.`
    });
  });
}
