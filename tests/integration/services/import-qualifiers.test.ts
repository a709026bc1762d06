import { QueryTypes } from 'sequelize';
import { expect, it } from 'vitest';
import { MeasurementQualifier } from '../../../src/lib/server/db/models/measurement-qualifier';
import { sequelize } from '../../../src/lib/server/db/sequelize';
import { createExperiment } from '../../../src/lib/server/services/experiments';
import { storeImport } from '../../../src/lib/server/services/import-storing';
import { receiveFile } from '../../../src/lib/server/services/imports';
import { makeExperimentForm } from '../../factories/experiment-form';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStudy } from '../../factories/study';

async function stored(lines: readonly string[]): Promise<{ readonly importId: string }> {
  const chemist = await makeMember({ lab: await makeLab(), role: 'chemist' });
  const { study } = await makeStudy(chemist);
  await makePanelEntry(study, { name: 'Alpha' });
  const experimentNumber = await createExperiment(
    chemist,
    study.code,
    makeExperimentForm({
      replicates: [{ kind: 'spiked', count: 3, labels: 'S1\nS2\nS3' }],
      spikes: [{ kind: 'spiked', targetsNg: '50' }]
    })
  );
  const { importId } = await receiveFile(chemist, study.code, {
    fileName: 'peaks.csv',
    bytes: Buffer.from(lines.join('\n')),
    experimentNumber
  });
  await storeImport(chemist, study.code, importId, { questionsConfirmed: true, reason: '' });
  return { importId };
}

it('keeps what the instrument says about a peak, for the values that have any', async () => {
  const { importId } = await stored([
    'Sample;Fraction;Analyte;Amount (ng);RT;Ion ratio (%);S/N;Manual integration;Cause of manual integration',
    'S1;Elution;Alpha;41;5,32;48,5;120;yes;tailing\tpeak, "split"',
    'S2;Elution;Alpha;42;5,31;;;no;',
    'S3;Elution;Alpha;43;;;;;'
  ]);
  const rows = await MeasurementQualifier.findAll({
    where: { importId },
    order: [['retentionTimeMin', 'DESC']]
  });
  expect(
    rows.map(({ retentionTimeMin, ionRatio, signalToNoise, isManual, manualCause }) => ({
      retentionTimeMin,
      ionRatio,
      signalToNoise,
      isManual,
      manualCause
    }))
  ).toEqual([
    {
      retentionTimeMin: 5.32,
      ionRatio: 0.485,
      signalToNoise: 120,
      isManual: true,
      manualCause: 'tailing\tpeak, "split"'
    },
    { retentionTimeMin: 5.31, ionRatio: null, signalToNoise: null, isManual: false, manualCause: null }
  ]);
  const [joined] = await sequelize.query<{ count: string }>(
    `SELECT count(*) FROM measurements m JOIN measurement_qualifiers q
       ON q.lab_id = m.lab_id AND q.injection_id = m.injection_id AND q.analyte_id = m.analyte_id WHERE m.import_id = $1`,
    { bind: [importId], type: QueryTypes.SELECT }
  );
  expect(joined?.count).toBe('2');
});

it('lets nobody change or remove them, nor add any to what is stored', async () => {
  const { importId } = await stored(['Sample;Fraction;Analyte;Amount (ng);RT', 'S1;Elution;Alpha;41;5,32']);
  const bind = { bind: [importId] };
  await expect(
    sequelize.query('UPDATE measurement_qualifiers SET retention_time_min = 1 WHERE import_id = $1', bind)
  ).rejects.toThrow();
  await expect(
    sequelize.query('DELETE FROM measurement_qualifiers WHERE import_id = $1', bind)
  ).rejects.toThrow();
  await expect(
    sequelize.query(
      `INSERT INTO measurement_qualifiers SELECT lab_id, study_id, import_id, gen_random_uuid(), analyte_id, 1, NULL, NULL, false, NULL
         FROM measurement_qualifiers WHERE import_id = $1`,
      bind
    )
  ).rejects.toThrow('being stored');
});
