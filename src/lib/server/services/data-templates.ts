import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { Lab } from '../db/models/lab';
import { sequelize } from '../db/sequelize';
import { NotFound } from '../errors';
import { writeTemplate } from '../imports/write-template';
import { loadExpectation, nothingDeclared } from './import-expectation';
import { require } from './permissions';
import { studyOf } from './study-of';

export interface ExperimentChoice {
  readonly number: number;
  readonly title: string;
  readonly stage: string;
  /** It has preparations but no stored value yet. */
  readonly waits: boolean;
}

/** The experiments of a study that data can be brought for, those that wait first. */
export async function experimentChoices(
  actor: Actor,
  studyCode: string
): Promise<readonly ExperimentChoice[]> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, studyCode);
  return sequelize.query<ExperimentChoice>(
    `SELECT e.number, e.title, s.name AS stage,
        EXISTS (SELECT 1 FROM replicates r WHERE r.experiment_id = e.id) AND NOT EXISTS (
          SELECT 1 FROM extracts x JOIN imports i ON i.id = x.import_id AND i.state = 'stored'
            WHERE x.experiment_id = e.id) AS waits
      FROM experiments e JOIN study_stages s ON s.id = e.stage_id
      WHERE e.lab_id = $1 AND e.study_id = $2 ORDER BY waits DESC, e.number`,
    { bind: [actor.labId, study.id], type: QueryTypes.SELECT }
  );
}

/**
 * The data template of one experiment, prefilled with its samples, fractions, analytes and internal standards.
 * @throws NotFound
 */
export async function experimentTemplate(
  actor: Actor,
  studyCode: string,
  input: Readonly<{ experimentNumber: number; layout: 'long' | 'wide' }>
): Promise<Readonly<{ fileName: string; bytes: Buffer }>> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, studyCode);
  const [experiment] = await sequelize.query<{ id: string }>(
    'SELECT id FROM experiments WHERE lab_id = $1 AND study_id = $2 AND number = $3',
    { bind: [actor.labId, study.id, input.experimentNumber], type: QueryTypes.SELECT }
  );
  if (!experiment) throw new NotFound('There is no such experiment in this study.');
  const lab = await Lab.findByPk(actor.labId, { attributes: ['isDemo', 'name'] });
  const expectation = await loadExpectation(
    { labId: actor.labId, studyId: study.id },
    { ...nothingDeclared, experimentId: experiment.id }
  );
  const bytes = await writeTemplate(expectation, experiment.id, input.layout, {
    demoLabel: lab?.isDemo ? `${lab.name}: invented demo data` : null
  });
  return { fileName: `${study.code}-experiment-${input.experimentNumber}-${input.layout}.xlsx`, bytes };
}
