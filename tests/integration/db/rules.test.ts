import { expect, test } from 'vitest';
import { sequelize } from '../../../src/lib/server/db/sequelize';
import { Exclusion } from '../../../src/lib/server/db/models/exclusion';
import { makeAnalyte } from '../../factories/analyte';
import { makeCalibrationSet } from '../../factories/calibration-set';
import { makeExperiment } from '../../factories/experiment';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStoredImport } from '../../factories/stored-import';
import { makeStudy, setStudyState } from '../../factories/study';

const run = (sql: string) => sequelize.query(sql);

async function measured() {
  const actor = await makeMember();
  const made = await makeStudy(actor);
  const entry = await makePanelEntry(made.study);
  const { experiment, fractions, replicates } = await makeExperiment(made, { spikes: { [entry.id]: 100 } });
  const stored = await makeStoredImport(actor, made.study, [
    {
      experimentId: experiment.id,
      replicateId: replicates[0]?.id ?? '',
      fractionId: fractions[0]?.id ?? '',
      analyteId: entry.analyteId,
      reported: 1200
    }
  ]);
  return { actor, ...made, entry, experiment, fractions, replicates, stored };
}

test('rows of an open study can be inserted, changed and deleted', async () => {
  const made = await makeStudy(await makeMember());
  const { experiment, fractions } = await makeExperiment(made);
  await run(`UPDATE experiments SET title = 'Changed' WHERE id = '${experiment.id}'`);
  await run(`DELETE FROM fractions WHERE id = '${fractions[0]?.id}'`);
  await run(`DELETE FROM experiments WHERE id = '${experiment.id}'`);
  const [rows] = await run(`SELECT id FROM replicates WHERE experiment_id = '${experiment.id}'`);
  expect(rows).toEqual([]);
});

test.each(['in review', 'reviewed', 'signed'] as const)(
  'a study %s refuses every change by direct SQL',
  async (state) => {
    const { study, stages, experiment, entry, replicates, actor, stored } = await measured();
    await setStudyState(study.id, state);
    const refused = new RegExp(`the study is ${state}`);
    const ids = `'${study.labId}', '${study.id}'`;
    const statements = [
      `INSERT INTO variants (id, lab_id, study_id, code, name, position) VALUES (gen_random_uuid(), ${ids}, 'Z', 'Late', 9)`,
      `UPDATE experiments SET title = 'Late' WHERE id = '${experiment.id}'`,
      `DELETE FROM experiment_spikes WHERE experiment_id = '${experiment.id}'`,
      `UPDATE panel_entries SET role = 'surrogate' WHERE id = '${entry.id}'`,
      `UPDATE study_stages SET name = 'Late' WHERE id = '${stages.drying}'`,
      `INSERT INTO replicate_spikes VALUES (${ids}, '${replicates[0]?.id}', '${entry.id}', 5)`,
      `INSERT INTO exclusions (id, lab_id, study_id, experiment_id, replicate_id, cause, excluded_by)
       VALUES (gen_random_uuid(), ${ids}, '${experiment.id}', '${replicates[0]?.id}', 'spilled', '${actor.userId}')`,
      `UPDATE imports SET state = 'withdrawn', end_reason = 'late' WHERE id = '${stored.id}'`,
      `UPDATE studies SET title = 'Late' WHERE id = '${study.id}'`,
      `UPDATE studies SET data_version = data_version + 1 WHERE id = '${study.id}'`,
      `UPDATE studies SET criteria_set_id = gen_random_uuid() WHERE id = '${study.id}'`,
      `DELETE FROM replicates WHERE id = '${replicates[2]?.id}'`,
      `DELETE FROM studies WHERE id = '${study.id}'`
    ];
    for (const statement of statements) await expect(run(statement), statement).rejects.toThrow(refused);
  }
);

test('a row cannot be moved out of a frozen study into an open one', async () => {
  const { study, actor, experiment } = await measured();
  const other = await makeStudy(actor);
  await setStudyState(study.id, 'signed');
  await expect(
    run(`UPDATE fractions SET study_id = '${other.study.id}' WHERE experiment_id = '${experiment.id}'`)
  ).rejects.toThrow(/the study is signed/);
});

test('what an import brought, and versions of the library, are never changed or deleted', async () => {
  const { entry, stored } = await measured();
  const immutable: readonly (readonly [string, string, string])[] = [
    ['measurements', 'reported = 1', `import_id = '${stored.id}'`],
    ['extracts', 'final_volume_ml = 9', `import_id = '${stored.id}'`],
    ['injections', 'dilution = 2', `import_id = '${stored.id}'`],
    ['sequences', `instrument = 'x'`, `import_id = '${stored.id}'`],
    ['analyte_versions', `name = 'x'`, `analyte_id = '${entry.analyteId}'`]
  ];
  for (const [table, change, where] of immutable) {
    await expect(run(`UPDATE ${table} SET ${change} WHERE ${where}`), table).rejects.toThrow(/never changed/);
    await expect(run(`DELETE FROM ${table} WHERE ${where}`), table).rejects.toThrow(/never changed/);
    await expect(run(`TRUNCATE ${table} CASCADE`), table).rejects.toThrow(
      /never (changed|deleted)|withdrawn/
    );
  }
});

test('the bytes of an import stay, and an import is never deleted', async () => {
  const { stored } = await measured();
  const where = `WHERE id = '${stored.id}'`;
  await expect(run(`UPDATE imports SET file_bytes = '\\x00' ${where}`)).rejects.toThrow(/byte for byte/);
  await expect(run(`UPDATE imports SET file_name = 'other.xlsx' ${where}`)).rejects.toThrow(/byte for byte/);
  await expect(run(`DELETE FROM imports ${where}`)).rejects.toThrow(/withdrawn, never deleted/);
});

test('an exclusion can be lifted and nothing else', async () => {
  const { actor, study, experiment, replicates } = await measured();
  const exclusion = await Exclusion.create({
    labId: study.labId,
    studyId: study.id,
    experimentId: experiment.id,
    replicateId: replicates[0]?.id ?? '',
    cause: 'Cartridge ran dry',
    excludedBy: actor.userId
  });
  const where = `WHERE id = '${exclusion.id}'`;
  await expect(run(`UPDATE exclusions SET cause = 'another' ${where}`)).rejects.toThrow(
    /lifted, never changed/
  );
  await expect(run(`DELETE FROM exclusions ${where}`)).rejects.toThrow(/lifted, never changed/);
  await run(
    `UPDATE exclusions SET lifted_by = '${actor.userId}', lifted_at = now(), lift_reason = 'wrong cartridge' ${where}`
  );
  await expect(run(`UPDATE exclusions SET lift_reason = 'another' ${where}`)).rejects.toThrow(
    /lifted, never changed/
  );
});

test('a row cannot point into another lab', async () => {
  const actor = await makeMember();
  const other = await makeMember();
  const { study, stages } = await makeStudy(actor);
  const foreign = await makeAnalyte(other.labId);
  await expect(makePanelEntry(study, { analyte: foreign })).rejects.toThrow(/foreign key/);
  const theirs = await makeStudy(other);
  await expect(
    makeExperiment({ study, stages: { ...stages, extraction: theirs.stages.extraction ?? '' } })
  ).rejects.toThrow(/foreign key/);
});

test('calibration levels of a frozen study cannot change', async () => {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  const entry = await makePanelEntry(study);
  const { levels } = await makeCalibrationSet(study, { panelEntryIds: [entry.id] });
  await setStudyState(study.id, 'in review');
  const where = `WHERE level_id = '${levels[0]?.id}'`;
  await expect(
    run(`UPDATE calibration_level_concentrations SET concentration_ng_per_ml = 9 ${where}`)
  ).rejects.toThrow(/the study is in review/);
  await expect(run(`DELETE FROM calibration_level_concentrations ${where}`)).rejects.toThrow(
    /the study is in review/
  );
});
