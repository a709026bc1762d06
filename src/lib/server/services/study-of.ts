import { col, fn, where as compare, Op, Transaction } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { Study } from '../db/models/study';
import { StudyStage } from '../db/models/study-stage';
import { NotFound } from '../errors';

/**
 * The study of this code in the actor's lab; capitals do not count.
 * `locked` keeps others from changing its row, or from counting up what belongs to it, until the transaction ends.
 * @throws NotFound when there is none, or it belongs to another lab
 */
export async function studyOf(
  actor: Actor,
  code: string,
  options: Readonly<{ locked?: boolean }> = {}
): Promise<Study> {
  const study = await Study.findOne({
    where: { [Op.and]: [{ labId: actor.labId }, compare(fn('lower', col('code')), code.toLowerCase())] },
    ...(options.locked ? { lock: Transaction.LOCK.NO_KEY_UPDATE } : {})
  });
  if (!study) throw new NotFound();
  return study;
}

/** The stages of a study, from the detector up. */
export async function stagesOf(study: Study): Promise<readonly StudyStage[]> {
  return StudyStage.findAll({
    where: { labId: study.labId, studyId: study.id },
    order: [['position', 'ASC']]
  });
}

/** The keys that every row of a study carries. */
export function studyKeys(study: Study): { readonly labId: string; readonly studyId: string } {
  return { labId: study.labId, studyId: study.id };
}
