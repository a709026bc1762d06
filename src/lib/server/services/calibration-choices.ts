import type { Actor } from '../../domain/actor';
import { fitText } from '../../domain/calibration-text';
import type { CalibrationModelName } from '../../domain/vocabulary';
import type { FitForm, FitsForm, ProposalQuery } from '../../schemas/calibration';
import type { ProposedFitsView } from '../../views/calibration';
import { fitChoiceOf } from '../amounts/calibration';
import { isSameFit, withChoices, type ProposedFit } from '../amounts/calibration-proposal';
import type { CalibrationSet } from '../amounts/types';
import { CalibrationFit } from '../db/models/calibration-fit';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound, type Problem } from '../errors';
import { namesIn, setOf } from './calibration-fits';
import { leavingOutProblem } from './calibration-levels';
import { movesOf, tokenOf } from './calibration-moves';
import { counted, listed } from './changes';
import { figuresOfStudy } from './figures/figures-cache';
import type { StudyData, StudyPanelEntry } from './figures/study-data';
import { require } from './permissions';
import { requireUnchanged } from './stale';
import { studyKeys, studyOf } from './study-of';

const coefficientsOf: Readonly<Record<CalibrationModelName, number>> = {
  'average response factor': 1,
  linear: 2,
  quadratic: 3
};

interface Proposal {
  readonly entry: StudyPanelEntry;
  readonly fit: ProposedFit;
}

/**
 * What a query or form proposes, entry by entry.
 * @throws NotFound for an analyte that is not on the panel, Invalid where levels cannot be left out
 */
function proposalsOf(data: StudyData, set: CalibrationSet, asked: ProposalQuery): readonly Proposal[] {
  const problems: Problem[] = [];
  const existing = new Set(set.levels.map(({ id }) => id));
  const proposals = [...new Set(asked.entries)].map((id): Proposal => {
    const entry = data.panel.find((item) => item.id === id);
    if (!entry) throw new NotFound();
    // The average response factor has its weighting built in.
    const weighting = asked.model === 'average response factor' ? 'none' : asked.weighting;
    const levelsLeftOut =
      asked.levels === 'keep'
        ? fitChoiceOf(set, id).levelsLeftOut.filter((level) => existing.has(level))
        : [...new Set(asked.levelsLeftOut)];
    const levels = set.levels.map((level) => ({
      id: level.id,
      label: level.label,
      concentration: level.concentrations.get(id) ?? null
    }));
    const problem = leavingOutProblem(levels, levelsLeftOut, coefficientsOf[asked.model]);
    if (problem) {
      problems.push({
        path: 'levelsLeftOut',
        message: asked.entries.length === 1 ? problem : `${entry.name}: ${problem}`
      });
    }
    return { entry, fit: { model: asked.model, weighting, levelsLeftOut } };
  });
  if (problems.length > 0) throw new Invalid(problems);
  return proposals;
}

/** What the token of a preview stands for. */
const plain = (proposals: readonly Proposal[]): unknown =>
  proposals
    .map(({ entry, fit }) => [entry.id, fit.model, fit.weighting, [...fit.levelsLeftOut].sort()])
    .sort((a, b) => String(a[0]).localeCompare(String(b[0])));

function wordsOf(set: CalibrationSet, fit: ProposedFit): string {
  const left = set.levels.filter(({ id }) => fit.levelsLeftOut.includes(id)).map(({ label }) => label);
  return `${fitText(fit.model, fit.weighting)}${left.length > 0 ? `, without ${listed(left)}` : ''}`;
}

/**
 * What the study's figures would be with other lines for some analytes of a set: nothing is stored.
 * @throws NotFound, Invalid
 */
export async function proposeFits(
  actor: Actor,
  code: string,
  setId: string,
  asked: ProposalQuery
): Promise<ProposedFitsView> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, code);
  const set = setOf(figures.data, setId);
  const proposals = proposalsOf(figures.data, set, asked);
  const proposed = withChoices(set, new Map(proposals.map(({ entry, fit }) => [entry.id, fit])));
  return {
    model: asked.model,
    weighting: asked.weighting,
    entries: proposals.map(({ entry, fit }) => ({
      entryId: entry.id,
      name: entry.name,
      seenRevision: fitChoiceOf(set, entry.id).revision ?? 0,
      before: wordsOf(set, fitChoiceOf(set, entry.id)),
      after: wordsOf(set, fit)
    })),
    alreadySo: proposals
      .filter(({ entry, fit }) => isSameFit(fit, fitChoiceOf(set, entry.id)))
      .map(({ entry }) => entry.name),
    moves: movesOf(figures, proposed, plain(proposals))
  };
}

/**
 * Chooses how analytes of a set are fitted, all of them or none. Each choice is a new revision with its reason; those before stay
 * on record.
 *
 * @param form.foretold the token of the preview; the choice is stored only while that still says what it does. Null: nothing was
 *   foretold (a caller that is no page).
 * @returns the revision of each analyte @throws NotFound, Invalid, Conflict when somebody chose meanwhile, or other data came
 */
export async function chooseFits(
  actor: Actor,
  code: string,
  setId: string,
  form: Omit<FitsForm, 'foretold'> & { readonly foretold: string | null }
): Promise<ReadonlyMap<string, number>> {
  require(actor, 'calibrations.choose');
  const seen = await studyOf(actor, code);
  return inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const { data } = await figuresOfStudy(actor.labId, code);
    const set = setOf(data, setId);
    for (const id of form.entries) {
      const choice = fitChoiceOf(set, id);
      requireUnchanged(
        `the fit of ${namesIn(data)(id)}`,
        form.seen[id] ?? 0,
        choice.revision ?? 0,
        choice.revision === null ? null : choice
      );
    }
    const proposals = proposalsOf(data, set, form);
    if (form.foretold !== null && form.foretold !== tokenOf(study.dataVersion, set.id, plain(proposals))) {
      throw new Conflict(
        'The data of this study changed after you looked at what the choice moves, so nothing was stored. What it moves now is below.'
      );
    }
    const revisions = new Map<string, number>();
    for (const { entry, fit } of proposals) {
      const revision = (fitChoiceOf(set, entry.id).revision ?? 0) + 1;
      revisions.set(entry.id, revision);
      await CalibrationFit.create({
        ...studyKeys(study),
        calibrationSetId: set.id,
        panelEntryId: entry.id,
        revision,
        model: fit.model,
        weighting: fit.weighting,
        levelsLeftOut: fit.levelsLeftOut,
        reason: form.reason,
        chosenBy: actor.userId
      });
    }
    const state = (of: (proposal: Proposal) => ProposedFit) =>
      Object.fromEntries(proposals.map((proposal) => [proposal.entry.name, wordsOf(set, of(proposal))]));
    const [first] = proposals;
    audit({
      action: 'chosen',
      entity: 'calibration',
      entityId: set.id,
      studyId: study.id,
      sentence:
        proposals.length === 1 && first
          ? `${first.entry.name} in ${set.name} is fitted by: ${wordsOf(set, first.fit)}.`
          : `${counted(proposals.length, 'analyte')} in ${set.name} are fitted otherwise: ${listed(proposals.map(({ entry }) => entry.name))}.`,
      before: state(({ entry }) => fitChoiceOf(set, entry.id)),
      after: state(({ fit }) => fit),
      reason: form.reason
    });
    return revisions;
  });
}

/** Chooses how one analyte of a set is fitted; see `chooseFits`. @returns the revision */
export async function chooseFit(actor: Actor, code: string, setId: string, form: FitForm): Promise<number> {
  const { panelEntryId, seenRevision, ...rest } = form;
  const revisions = await chooseFits(actor, code, setId, {
    ...rest,
    entries: [panelEntryId],
    seen: { [panelEntryId]: seenRevision },
    levels: 'these',
    foretold: null
  });
  return revisions.get(panelEntryId) ?? 0;
}
