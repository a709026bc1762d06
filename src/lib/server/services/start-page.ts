import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { StartView, WaitingExperiment } from '../../views/start';
import { sequelize } from '../db/sequelize';
import { ExpectedError } from '../errors';
import { require } from './permissions';
import { stageLadderView } from './results';
import { listStudies } from './studies';

/** Findings are worked out for the studies that moved last only: each reads a whole study. */
const findingsShown = 3;

/** Experiments of open studies that are prepared and have no stored value, the oldest first. */
export async function experimentsWithoutData(actor: Actor): Promise<readonly WaitingExperiment[]> {
  require(actor, 'studies.see');
  return sequelize.query<WaitingExperiment>(
    `SELECT s.code AS study, s.title AS "studyTitle", e.number, e.title, st.name AS stage,
        e.performed_on::text AS "performedOn",
        (SELECT count(*)::int FROM replicates r WHERE r.experiment_id = e.id) AS replicates,
        (SELECT count(*)::int FROM fractions f WHERE f.experiment_id = e.id) AS fractions
      FROM experiments e
      JOIN studies s ON s.id = e.study_id AND s.state IN ('draft', 'returned')
      JOIN study_stages st ON st.id = e.stage_id
      WHERE e.lab_id = $1 AND EXISTS (SELECT 1 FROM replicates r WHERE r.experiment_id = e.id)
        AND NOT EXISTS (SELECT 1 FROM extracts x JOIN imports i ON i.id = x.import_id AND i.state = 'stored'
          WHERE x.experiment_id = e.id)
      ORDER BY e.performed_on NULLS LAST, s.code, e.number`,
    { bind: [actor.labId], type: QueryTypes.SELECT }
  );
}

/** The finding of one study, or null where its figures cannot be formed yet. */
async function findingOf(actor: Actor, study: string): Promise<string | null> {
  try {
    const { findings } = await stageLadderView(actor, study, {}, () => `/studies/${study}`);
    return findings.lead;
  } catch (error) {
    if (error instanceof ExpectedError) return null;
    throw error;
  }
}

/** What the person comes for, by their role: the chemist for the losses, everybody else for what is on their desk. */
export async function startPage(actor: Actor): Promise<StartView> {
  require(actor, 'studies.see');
  const studies = await listStudies(actor);
  const measured = studies.filter(({ stageReached }) => stageReached !== null).slice(0, findingsShown);
  const findings = new Map<string, string | null>();
  if (actor.role === 'chemist') {
    for (const { code } of measured) findings.set(code, await findingOf(actor, code));
  }
  return {
    studies: studies.map((study) => ({ ...study, finding: findings.get(study.code) ?? null })),
    waiting: actor.role === 'analyst' || actor.role === 'chemist' ? await experimentsWithoutData(actor) : []
  };
}
