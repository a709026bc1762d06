import { randomBytes } from 'node:crypto';
import type { Actor } from '../../src/lib/domain/actor';
import { standardStages } from '../../src/lib/domain/stages';
import type { StudyState } from '../../src/lib/domain/vocabulary';
import { Study } from '../../src/lib/server/db/models/study';
import { StudyStage } from '../../src/lib/server/db/models/study-stage';
import { makeCriteriaSet } from './criteria-set';

export interface MadeStudy {
  readonly study: Study;
  /** Stage ids by key. */
  readonly stages: Readonly<Record<string, string>>;
}

/** A study of the actor's lab with the four stages and criteria of its own. */
export async function makeStudy(
  actor: Actor,
  overrides: Readonly<Partial<{ code: string; title: string; matrix: string; sampleVolumeMl: number }>> = {}
): Promise<MadeStudy> {
  const criteria = await makeCriteriaSet(actor.labId);
  const study = await Study.create({
    labId: actor.labId,
    code: `T-${randomBytes(4).toString('hex')}`,
    title: 'Trace organics in river water',
    matrix: 'river water',
    criteriaSetId: criteria.id,
    criteriaSetVersionId: criteria.versionId,
    ownerId: actor.userId,
    ...overrides
  });
  const stages: Record<string, string> = {};
  for (const [index, { key, name, kind }] of standardStages.entries()) {
    const stage = await StudyStage.create({
      labId: actor.labId,
      studyId: study.id,
      key,
      name,
      kind,
      position: index + 1
    });
    stages[key] = stage.id;
  }
  return { study, stages };
}

/** Moves a study to another state by itself, as a submission or a return would. */
export async function setStudyState(studyId: string, state: StudyState): Promise<void> {
  await Study.update({ state }, { where: { id: studyId } });
}
