import { QueryTypes, Transaction } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { nameKey } from '../../domain/name-key';
import type { AnalyteForm, AnalyteVersionForm } from '../../schemas/analyte';
import type { AnalytePage, AnalyteVersionView, AnalyteView, NameMatch } from '../../views/library';
import { newId } from '../db/entity-id';
import { Analyte } from '../db/models/analyte';
import { AnalyteVersion } from '../db/models/analyte-version';
import { Lab } from '../db/models/lab';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Invalid, NotFound } from '../errors';
import { changesBetween, listed } from './changes';
import { requireReadable } from './analyte-chemistry';
import { knownId } from './known-id';
import { likenesses, likenessProblems } from './library-likeness';
import { briefColumns, briefOf, currentAnalytes } from './library-rows';
import { matchNames } from './name-matching';
import { require } from './permissions';
import { requireUnchanged } from './stale';

const pageSize = 100;

/** The library by name, a page at a time; `text` looks into names, synonyms, classes and CAS numbers. */
export async function listAnalytes(
  actor: Actor,
  input: Readonly<{ text?: string; class?: string; page?: number }> = {}
): Promise<AnalytePage> {
  require(actor, 'studies.see');
  const key = nameKey(input.text ?? '');
  const plain = (input.text ?? '').trim().toLowerCase();
  const found = (await currentAnalytes(actor.labId)).filter(
    (analyte) =>
      (plain === '' ||
        (key !== '' && [analyte.name, ...analyte.synonyms].some((name) => nameKey(name).includes(key))) ||
        (analyte.cas ?? '').includes(plain) ||
        (analyte.class ?? '').toLowerCase().includes(plain)) &&
      (!input.class || analyte.class === input.class)
  );
  const pages = Math.max(1, Math.ceil(found.length / pageSize));
  const page = Math.min(Math.max(1, input.page ?? 1), pages);
  return {
    analytes: found.slice((page - 1) * pageSize, page * pageSize).map(briefOf),
    total: found.length,
    page,
    pages
  };
}

/** The classes that the library uses, by name. */
export async function listClasses(actor: Actor): Promise<readonly string[]> {
  require(actor, 'studies.see');
  const classes = (await currentAnalytes(actor.labId)).map((analyte) => analyte.class ?? '');
  return [...new Set(classes)].filter((name) => name !== '').sort((a, b) => a.localeCompare(b));
}

/** Recognises pasted lines (names, CAS numbers, or both) among the library's analytes. */
export async function findByNames(actor: Actor, lines: readonly string[]): Promise<readonly NameMatch[]> {
  require(actor, 'studies.see');
  return matchNames(lines, await currentAnalytes(actor.labId));
}

type VersionRow = Omit<AnalyteVersionView, 'createdAt'> & { readonly createdAt: Date };

/** One analyte with all its versions and the studies that use it. @throws NotFound */
export async function getAnalyte(actor: Actor, id: string): Promise<AnalyteView> {
  require(actor, 'studies.see');
  const bind = [actor.labId, knownId(id)];
  const rows = await sequelize.query<VersionRow>(
    `SELECT ${briefColumns}, v.id AS "versionId", v.synonyms, v.smiles, v.vapour_pressure_pa AS "vapourPressurePa",
        v.water_solubility_mg_l AS "waterSolubilityMgL", v.sources, v.note, u.name AS "createdBy", v.created_at AS "createdAt"
      FROM analyte_versions v LEFT JOIN users u ON u.id = v.created_by
      WHERE v.lab_id = $1 AND v.analyte_id = $2 ORDER BY v.version DESC`,
    { bind, type: QueryTypes.SELECT }
  );
  const versions = rows.map((row) => ({ ...row, createdAt: row.createdAt.toISOString() }));
  const [current] = versions;
  if (!current) throw new NotFound();
  const studies = await sequelize.query<AnalyteView['studies'][number]>(
    `SELECT s.code, s.title, v.version
      FROM panel_entries p JOIN studies s ON s.id = p.study_id AND s.lab_id = p.lab_id
        JOIN analyte_versions v ON v.id = p.analyte_version_id
      WHERE p.lab_id = $1 AND p.analyte_id = $2 ORDER BY lower(s.code)`,
    { bind, type: QueryTypes.SELECT }
  );
  return { id, current, versions, studies };
}

/** @throws Invalid when the structure cannot be read, or another analyte could be the same (`likenessProblems`) */
async function requireDistinct(actor: Actor, form: AnalyteForm, ownId: string | null): Promise<void> {
  await requireReadable(form.smiles);
  const others = (await currentAnalytes(actor.labId)).filter(({ id }) => id !== ownId);
  const problems = [
    ...(nameKey(form.name) === '' ? [{ path: 'name', message: 'A name needs a letter or a digit.' }] : []),
    ...likenessProblems(await likenesses(form, others), form.sameStructure)
  ];
  if (problems.length > 0) throw new Invalid(problems);
}

function versionValues(form: AnalyteForm) {
  const sources = Object.fromEntries(Object.entries(form.sources).filter(([, source]) => source));
  return {
    name: form.name,
    synonyms: form.synonyms,
    cas: form.cas,
    class: form.class || null,
    smiles: form.smiles || null,
    formula: form.formula || null,
    molarMass: form.molarMass,
    logKow: form.logKow,
    pkaAcid: form.pkaAcid,
    pkaBase: form.pkaBase,
    boilingPointC: form.boilingPointC,
    vapourPressurePa: form.vapourPressurePa,
    henryPaM3Mol: form.henryPaM3Mol,
    waterSolubilityMgL: form.waterSolubilityMgL,
    sources,
    note: form.note || null
  };
}

/** One after the other within a lab, so that two people cannot add the same name at once. */
async function lockLibrary(actor: Actor): Promise<void> {
  await Lab.findByPk(actor.labId, { lock: Transaction.LOCK.NO_KEY_UPDATE });
}

/** Puts an analyte into the library. @returns its id @throws Invalid when its name, CAS number or structure is there already */
export async function createAnalyte(actor: Actor, form: AnalyteForm): Promise<string> {
  require(actor, 'library.edit');
  return inTransaction(actor, {}, async () => {
    await lockLibrary(actor);
    await requireDistinct(actor, form, null);
    const id = newId();
    const versionId = newId();
    const values = versionValues(form);
    const { labId } = actor;
    await Analyte.create({ id, labId, currentVersionId: versionId });
    await AnalyteVersion.create({
      id: versionId,
      labId,
      analyteId: id,
      version: 1,
      createdBy: actor.userId,
      ...values
    });
    audit({
      action: 'created',
      entity: 'analyte',
      entityId: id,
      sentence: `Added ${form.name} to the library.`,
      after: values
    });
    return id;
  });
}

/**
 * Adds a version of an analyte. Studies keep the version they have pinned until somebody takes the new one over.
 * @returns the version's number @throws NotFound, Conflict when another version was added meanwhile, Invalid
 */
export async function newAnalyteVersion(actor: Actor, id: string, form: AnalyteVersionForm): Promise<number> {
  require(actor, 'library.edit');
  return inTransaction(actor, {}, async () => {
    await lockLibrary(actor);
    const analyte = await Analyte.findOne({ where: { labId: actor.labId, id: knownId(id) } });
    const current = await AnalyteVersion.findOne({
      where: { labId: actor.labId, analyteId: id },
      order: [['version', 'DESC']]
    });
    if (!analyte || !current) throw new NotFound();
    requireUnchanged(current.name, form.seenVersion, current.version, (await getAnalyte(actor, id)).current);
    await requireDistinct(actor, form, id);
    const values = versionValues(form);
    const { before, after, names } = changesBetween(current.get({ plain: true }), values);
    if (names.length === 0) return current.version;
    const version = current.version + 1;
    const versionId = newId();
    await AnalyteVersion.create({
      id: versionId,
      labId: actor.labId,
      analyteId: id,
      version,
      createdBy: actor.userId,
      ...values
    });
    await analyte.update({ currentVersionId: versionId });
    audit({
      action: 'changed',
      entity: 'analyte',
      entityId: id,
      sentence: `Version ${version} of ${form.name} in the library: ${listed(names)} changed.`,
      before,
      after
    });
    return version;
  });
}
