import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { StepParameters } from '../../domain/procedure';
import type {
  EvidenceForm,
  StepForm,
  StepsForm,
  VariantChangeForm,
  VariantForm
} from '../../schemas/variant';
import type { EvidenceView, VariantView } from '../../views/variants';
import { Experiment } from '../db/models/experiment';
import { ProcedureStep } from '../db/models/procedure-step';
import { StageEvidence } from '../db/models/stage-evidence';
import type { Study } from '../db/models/study';
import { Variant } from '../db/models/variant';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound } from '../errors';
import { changesBetween, counted, listed } from './changes';
import { require } from './permissions';
import { requireUnchanged } from './stale';
import { stagesOf, studyKeys, studyOf } from './study-of';

const sumOf = (values: readonly (number | undefined)[]): number | null => {
  const given = values.filter((value) => value !== undefined);
  return given.length === 0 ? null : given.reduce((sum, value) => sum + value, 0);
};

async function viewsOf(study: Study, variants: readonly Variant[]): Promise<readonly VariantView[]> {
  const keyOf = new Map((await stagesOf(study)).map(({ id, key }) => [id, key]));
  const steps = await ProcedureStep.findAll({ where: studyKeys(study), order: [['position', 'ASC']] });
  const evidence = await sequelize.query<EvidenceView & { variantId: string }>(
    `SELECT e.variant_id AS "variantId", s.key AS "stageKey", e.matrix, e.level_label AS "levelLabel",
        x.number AS "experimentNumber", x.title AS "experimentTitle"
      FROM stage_evidence e JOIN study_stages s ON s.id = e.stage_id JOIN experiments x ON x.id = e.experiment_id
      WHERE e.lab_id = $1 AND e.study_id = $2 ORDER BY s.position, e.matrix NULLS FIRST, e.level_label NULLS FIRST`,
    { bind: [study.labId, study.id], type: QueryTypes.SELECT }
  );
  return variants.map((variant) => {
    const own = steps.filter(({ variantId }) => variantId === variant.id);
    return {
      id: variant.id,
      code: variant.code,
      name: variant.name,
      description: variant.description,
      version: variant.version,
      steps: own.map(({ stageId, kind, instruction, parameters }) => ({
        stageKey: keyOf.get(stageId) ?? '',
        kind,
        instruction,
        parameters
      })),
      evidence: evidence
        .filter(({ variantId }) => variantId === variant.id)
        .map(({ variantId: _, ...rest }) => rest),
      totals: {
        solventMl: sumOf(
          own.filter(({ parameters }) => parameters.solvent).map(({ parameters }) => parameters.volumeMl)
        ),
        minutes: sumOf(own.map(({ parameters }) => parameters.minutes))
      }
    };
  });
}

/** The variants of a study in the order of their making. @throws NotFound */
export async function listVariants(actor: Actor, code: string): Promise<readonly VariantView[]> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, code);
  return viewsOf(study, await Variant.findAll({ where: studyKeys(study), order: [['position', 'ASC']] }));
}

async function variantOf(study: Study, variantCode: string): Promise<Variant> {
  const variants = await Variant.findAll({ where: studyKeys(study) });
  const variant = variants.find(({ code }) => code.toLowerCase() === variantCode.toLowerCase());
  if (!variant) throw new NotFound();
  return variant;
}

/** One variant with its procedure and its evidence. @throws NotFound */
export async function getVariant(actor: Actor, code: string, variantCode: string): Promise<VariantView> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, code);
  const [view] = await viewsOf(study, [await variantOf(study, variantCode)]);
  if (!view) throw new NotFound();
  return view;
}

/** @returns the code of the new variant @throws Invalid when the code is taken */
export async function createVariant(actor: Actor, code: string, form: VariantForm): Promise<string> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  return inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const others = await Variant.findAll({ where: studyKeys(study), attributes: ['code', 'position'] });
    if (others.some((other) => other.code.toLowerCase() === form.code.toLowerCase())) {
      throw Invalid.at('code', `There is already a variant ${form.code} in this study.`);
    }
    const position = Math.max(0, ...others.map((other) => other.position)) + 1;
    const variant = await Variant.create({ ...studyKeys(study), ...form, position });
    audit({
      action: 'created',
      entity: 'variant',
      entityId: variant.id,
      studyId: study.id,
      sentence: `Added variant ${form.code}, ${form.name}.`,
      after: form
    });
    return variant.code;
  });
}

/** Locks a variant for a change, against the version that the person saw. */
async function changing(actor: Actor, code: string, variantCode: string, version: number) {
  const study = await studyOf(actor, code, { locked: true });
  const variant = await variantOf(study, variantCode);
  const current = version === variant.version ? null : await getVariant(actor, code, variantCode);
  requireUnchanged(`variant ${variant.code}`, version, variant.version, current);
  return { study, variant };
}

/** Changes a variant's name and description. */
export async function updateVariant(
  actor: Actor,
  code: string,
  variantCode: string,
  form: VariantChangeForm
): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const { study, variant } = await changing(actor, code, variantCode, form.version);
    const values = { name: form.name, description: form.description };
    const { before, after, names } = changesBetween(variant.get({ plain: true }), values);
    if (names.length === 0) return;
    await variant.update({ ...values, version: variant.version + 1 });
    audit({
      action: 'changed',
      entity: 'variant',
      entityId: variant.id,
      studyId: study.id,
      sentence: `Changed the ${listed(names)} of variant ${variant.code}.`,
      before,
      after
    });
  });
}

function parametersOf({ ph, solvent, volumeMl, minutes, temperatureC }: StepForm): StepParameters {
  return {
    ...(ph === null ? {} : { ph }),
    ...(solvent === '' ? {} : { solvent }),
    ...(volumeMl === null ? {} : { volumeMl }),
    ...(minutes === null ? {} : { minutes }),
    ...(temperatureC === null ? {} : { temperatureC })
  };
}

/** Sets the whole procedure of a variant, in order; the one before is kept in the history. */
export async function setProcedureSteps(
  actor: Actor,
  code: string,
  variantCode: string,
  form: StepsForm
): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const { study, variant } = await changing(actor, code, variantCode, form.version);
    const stages = new Map((await stagesOf(study)).map(({ key, id }) => [key, id]));
    const unknown = form.steps.flatMap(({ stageKey }, index) =>
      stages.has(stageKey)
        ? []
        : [
            {
              path: `steps.${index}.stageKey`,
              message: 'Choose one of the stages of this study.',
              found: stageKey
            }
          ]
    );
    if (unknown.length > 0) throw new Invalid(unknown);
    const before = (await getVariant(actor, code, variantCode)).steps;
    await ProcedureStep.destroy({ where: { ...studyKeys(study), variantId: variant.id } });
    for (const [index, step] of form.steps.entries()) {
      await ProcedureStep.create({
        ...studyKeys(study),
        variantId: variant.id,
        stageId: stages.get(step.stageKey) ?? '',
        position: index + 1,
        kind: step.kind,
        instruction: step.instruction,
        parameters: parametersOf(step)
      });
    }
    await variant.update({ version: variant.version + 1 });
    audit({
      action: 'changed',
      entity: 'variant',
      entityId: variant.id,
      studyId: study.id,
      sentence: `Set the procedure of variant ${variant.code}: ${counted(form.steps.length, 'step')} (before: ${before.length}).`,
      before,
      after: (await getVariant(actor, code, variantCode)).steps
    });
  });
}

/** Why an experiment cannot stand for a stage of this variant; null: it can. */
async function evidenceProblem(
  study: Study,
  variant: Variant,
  stageId: string,
  experiment: Experiment
): Promise<string | null> {
  if (experiment.stageId !== stageId) return `Experiment ${experiment.number} was not spiked at this stage.`;
  const source = (await stagesOf(study)).at(-1);
  if (source?.id !== stageId) return null;
  const others = await StageEvidence.findAll({
    where: { ...studyKeys(study), stageId, experimentId: experiment.id }
  });
  const other = others.find(({ variantId }) => variantId !== variant.id);
  if (!other) return null;
  const taken = await Variant.findByPk(other.variantId);
  return `Experiment ${experiment.number} already stands for variant ${taken?.code}: an ${source.name.toLowerCase()} experiment serves one variant.`;
}

/**
 * Chooses the experiment that stands for a stage of a variant, in general or for one matrix and level; number 0 takes the choice
 * back. Others at the same stage stay beside it and are never pooled with it.
 */
export async function chooseStageEvidence(
  actor: Actor,
  code: string,
  variantCode: string,
  form: EvidenceForm
): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const variant = await variantOf(study, variantCode);
    const stage = (await stagesOf(study)).find(({ key }) => key === form.stageKey);
    if (!stage) throw new NotFound();
    const place = {
      ...studyKeys(study),
      variantId: variant.id,
      stageId: stage.id,
      matrix: form.matrix || null,
      levelLabel: form.levelLabel || null
    };
    const chosen = await StageEvidence.findOne({ where: place });
    const before = chosen ? await Experiment.findByPk(chosen.experimentId) : null;
    if ((before?.number ?? 0) === form.experimentNumber) return;
    await chosen?.destroy();
    let sentence = `No experiment stands for ${stage.name.toLowerCase()} of variant ${variant.code} now.`;
    if (form.experimentNumber > 0) {
      const where = { ...studyKeys(study), number: form.experimentNumber };
      const experiment = await Experiment.findOne({ where });
      if (!experiment)
        throw Invalid.at('experimentNumber', `There is no experiment ${form.experimentNumber}.`);
      const problem = await evidenceProblem(study, variant, stage.id, experiment);
      if (problem) throw Invalid.at('experimentNumber', problem);
      await StageEvidence.create({ ...place, experimentId: experiment.id });
      sentence = `Experiment ${experiment.number} stands for ${stage.name.toLowerCase()} of variant ${variant.code}.`;
    }
    audit({
      action: 'changed',
      entity: 'variant',
      entityId: variant.id,
      studyId: study.id,
      sentence,
      before: { stage: stage.key, experiment: before?.number ?? null },
      after: { stage: stage.key, experiment: form.experimentNumber || null }
    });
  });
}

/** Takes a variant away that nothing rests on yet. @throws Conflict when an experiment stands for one of its stages */
export async function removeVariant(
  actor: Actor,
  code: string,
  variantCode: string,
  version: number
): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const { study, variant } = await changing(actor, code, variantCode, version);
    const view = await getVariant(actor, code, variantCode);
    if (view.evidence.length > 0) {
      const numbers = [...new Set(view.evidence.map(({ experimentNumber }) => experimentNumber))];
      throw new Conflict(
        `${counted(numbers.length, 'experiment')} (${listed(numbers.map(String))}) stand for stages of variant ${variant.code}. Take these choices back first.`
      );
    }
    await variant.destroy();
    audit({
      action: 'removed',
      entity: 'variant',
      entityId: variant.id,
      studyId: study.id,
      sentence: `Took variant ${variant.code}, ${variant.name}, away.`,
      before: view
    });
  });
}
