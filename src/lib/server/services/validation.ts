import type { Actor } from '../../domain/actor';
import { validationPartTitles } from '../../domain/validation-parts';
import type { DuplicatePairForm, PairRemovalForm, ValidationChoiceForm } from '../../schemas/validation';
import type { ValidationView } from '../../views/validation';
import { DuplicatePair } from '../db/models/duplicate-pair';
import { Experiment } from '../db/models/experiment';
import { Replicate } from '../db/models/replicate';
import type { Study } from '../db/models/study';
import { ValidationEvidence } from '../db/models/validation-evidence';
import { Variant } from '../db/models/variant';
import { audit, inTransaction } from '../db/transaction';
import { Invalid, NotFound } from '../errors';
import { listed } from './changes';
import { addressText, type Link } from './figures/addresses';
import { figuresOfStudy } from './figures/figures-cache';
import { variantByCode } from './figures/subject';
import { usualVariant, validationOf } from './figures/validation/validation-view';
import { require } from './permissions';
import type { FigureLink } from './results';
import { requireUnchanged } from './stale';
import { stagesOf, studyKeys, studyOf } from './study-of';

/**
 * The validation of a study, of the variant asked for or the last that was measured.
 * @throws NotFound for a study or a variant that is not there
 */
export async function validationView(
  actor: Actor,
  study: string,
  query: Readonly<{ variant?: string | undefined }>,
  figureLink: FigureLink
): Promise<ValidationView> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, study);
  const variant = query.variant === undefined ? usualVariant(figures) : variantByCode(figures, query.variant);
  const link: Link = (address) => figureLink(addressText(address));
  return validationOf(figures, variant, link);
}

/** The variant of this code; null for an empty one. @throws Invalid */
async function variantNamed(study: Study, code: string): Promise<Variant | null> {
  if (code === '') return null;
  const variants = await Variant.findAll({ where: studyKeys(study) });
  const variant = variants.find((item) => item.code.toLowerCase() === code.toLowerCase());
  if (!variant) throw Invalid.at('variantCode', `There is no variant ${code}.`);
  return variant;
}

/** The experiments of these numbers, spiked in the sample. @throws Invalid naming those that cannot stand for a part */
async function experimentsNumbered(study: Study, numbers: readonly number[]): Promise<Experiment[]> {
  const source = (await stagesOf(study)).at(-1);
  const all = await Experiment.findAll({ where: studyKeys(study), order: [['number', 'ASC']] });
  const problems = [...new Set(numbers)].flatMap((number) => {
    const experiment = all.find((item) => item.number === number);
    if (!experiment) return [`There is no experiment ${number}.`];
    return experiment.stageId === source?.id
      ? []
      : [`Experiment ${number} was not spiked in the sample, so it shows a part of the method only.`];
  });
  if (problems.length > 0) throw Invalid.at('experiments', problems.join(' '));
  return all.filter(({ number }) => numbers.includes(number));
}

/**
 * Chooses the experiments that stand for a part of the validation, with the reason. None takes the choice back.
 * @throws Conflict when somebody chose otherwise meanwhile; Invalid for what is not there
 */
export async function chooseValidationEvidence(
  actor: Actor,
  code: string,
  form: ValidationChoiceForm
): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const variant = await variantNamed(study, form.variantCode);
    const experiments = await experimentsNumbered(study, form.experiments);
    const place = { ...studyKeys(study), part: form.part, variantId: variant?.id ?? null };
    const rows = await ValidationEvidence.findAll({ where: place });
    const stored = await numbersOf(study, rows);
    const wanted = experiments.map(({ number }) => number);
    const title = validationPartTitles[form.part];
    // What was asked for is there already: a second click changes nothing.
    if (stored.join(',') === wanted.join(',') && rows.every(({ reason }) => reason === form.reason)) return;
    const inForce =
      rows.length > 0 || variant === null ? stored : await numbersOf(study, await generalRows(study, form));
    requireUnchanged(`what ${title.toLowerCase()} rests on`, form.seen, inForce.join(','), {
      experiments: inForce
    });
    await ValidationEvidence.destroy({ where: place });
    for (const experiment of experiments) {
      await ValidationEvidence.create({
        ...place,
        experimentId: experiment.id,
        reason: form.reason,
        chosenBy: actor.userId
      });
    }
    const of = variant ? ` of variant ${variant.code}` : '';
    audit({
      action: 'changed',
      entity: 'study',
      entityId: study.id,
      studyId: study.id,
      sentence:
        wanted.length === 0
          ? `${title}${of}: no experiment is chosen now.`
          : `${title}${of} rests on experiment${wanted.length === 1 ? '' : 's'} ${listed(wanted.map(String))}.`,
      before: { part: form.part, variant: variant?.code ?? null, experiments: stored },
      after: { part: form.part, variant: variant?.code ?? null, experiments: wanted },
      reason: form.reason
    });
  });
}

async function generalRows(study: Study, { part }: ValidationChoiceForm): Promise<ValidationEvidence[]> {
  return ValidationEvidence.findAll({ where: { ...studyKeys(study), part, variantId: null } });
}

async function numbersOf(study: Study, rows: readonly ValidationEvidence[]): Promise<number[]> {
  const found = await Experiment.findAll({
    where: { ...studyKeys(study), id: rows.map(({ experimentId }) => experimentId) },
    order: [['number', 'ASC']]
  });
  return found.map(({ number }) => number);
}

/**
 * Declares two preparations of one experiment to be duplicates of each other.
 * @throws Invalid for preparations of another kind, or one that has a duplicate already
 */
export async function declareDuplicates(actor: Actor, code: string, form: DuplicatePairForm): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const keys = studyKeys(study);
    const experiment = await Experiment.findOne({ where: { ...keys, number: form.experimentNumber } });
    if (!experiment) throw Invalid.at('experimentNumber', `There is no experiment ${form.experimentNumber}.`);
    const own = await Replicate.findAll({ where: { ...keys, experimentId: experiment.id } });
    const [first, second] = (['first', 'second'] as const).map((path) => {
      const replicate = own.find(({ id }) => id === form[path]);
      if (!replicate) throw Invalid.at(path, `Experiment ${experiment.number} has no such preparation.`);
      return replicate;
    });
    if (!first || !second || first.id === second.id)
      throw Invalid.at('second', 'Choose two different preparations.');
    if (first.kind !== second.kind || (first.kind !== 'spiked' && first.kind !== 'unspiked')) {
      throw Invalid.at(
        'second',
        `Duplicates are two spiked or two unspiked portions; ${first.label} is ${first.kind} and ${second.label} ${second.kind}.`
      );
    }
    const pairs = await DuplicatePair.findAll({ where: { ...keys, experimentId: experiment.id } });
    const paired = (id: string): DuplicatePair | undefined =>
      pairs.find(
        ({ firstReplicateId, secondReplicateId }) => firstReplicateId === id || secondReplicateId === id
      );
    if (paired(first.id) && paired(first.id)?.id === paired(second.id)?.id) return;
    for (const [path, replicate] of [['first', first] as const, ['second', second] as const]) {
      if (paired(replicate.id)) throw Invalid.at(path, `${replicate.label} has a duplicate already.`);
    }
    const pair = await DuplicatePair.create({
      ...keys,
      experimentId: experiment.id,
      firstReplicateId: first.id,
      secondReplicateId: second.id,
      reason: form.reason,
      declaredBy: actor.userId
    });
    audit({
      action: 'added',
      entity: 'experiment',
      entityId: experiment.id,
      studyId: study.id,
      sentence: `Declared ${first.label} and ${second.label} of experiment ${experiment.number} to be duplicates.`,
      after: { pair: pair.id, preparations: [first.label, second.label] },
      reason: form.reason
    });
  });
}

/** Takes the declaration of two duplicates back; the preparations stay as they are. @throws NotFound */
export async function takeBackDuplicates(actor: Actor, code: string, form: PairRemovalForm): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const pair = await DuplicatePair.findOne({ where: { ...studyKeys(study), id: form.pair } });
    if (!pair) throw new NotFound();
    const replicates = await Replicate.findAll({
      where: { ...studyKeys(study), id: [pair.firstReplicateId, pair.secondReplicateId] },
      order: [['number', 'ASC']]
    });
    const labels = replicates.map(({ label }) => label);
    await pair.destroy();
    audit({
      action: 'removed',
      entity: 'experiment',
      entityId: pair.experimentId,
      studyId: study.id,
      sentence: `${listed(labels)} are no longer declared duplicates.`,
      before: { preparations: labels, reason: pair.reason }
    });
  });
}
