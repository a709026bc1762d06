import type { Actor } from '../../domain/actor';
import type {
  CompareView,
  ExperimentChoice,
  PortionsView,
  ResultsTableView,
  StageFindings,
  SubjectView
} from '../../views/findings';
import type { MassBalanceView } from '../../views/mass-balance';
import type { ProvenanceView } from '../../views/provenance';
import type { StageLadderView } from '../../views/stage-ladder';
import type { WalkBackView } from '../../views/walk-back';
import { addressText, parseAddress, type Link } from './figures/addresses';
import { compareOf } from './figures/compare-view';
import { figuresOfStudy } from './figures/figures-cache';
import { massBalanceOf } from './figures/mass-balance-view';
import { portionsOf } from './figures/portions-view';
import { provenanceOf } from './figures/provenance-view';
import { resultsTableOf } from './figures/results-table-view';
import { stageFindingsOf } from './figures/stage-findings';
import { stageLadderOf } from './figures/stage-ladder-view';
import {
  experimentByNumber,
  experimentChoice,
  subjectOf,
  subjectView,
  type SubjectQuery
} from './figures/subject';
import { walkBackOf } from './figures/walk-back-view';
import { require } from './permissions';

export type { SubjectQuery } from './figures/subject';

/** Makes the address that opens a figure's provenance on the page that asks: "?variant=D&figure=recovery:3:…". */
export type FigureLink = (address: string) => string;

const linkOf =
  (figureLink: FigureLink): Link =>
  (address) =>
    figureLink(addressText(address));

/** The mass balance of a variant's extraction (or of the experiment asked for), rows in panel order. */
export async function massBalanceView(
  actor: Actor,
  study: string,
  query: SubjectQuery,
  figureLink: FigureLink
): Promise<{
  readonly subject: SubjectView;
  readonly balance: MassBalanceView;
  readonly notes: readonly string[];
}> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, study);
  const subject = subjectOf(figures, query);
  return {
    subject: subjectView(figures, subject),
    balance: massBalanceOf(figures, subject, linkOf(figureLink)),
    notes: openNotes(subject)
  };
}

/** Why, for how many analytes, what is lost on the way cannot be told from what is open. */
function openNotes({ context }: ReturnType<typeof subjectOf>): string[] {
  if (!context)
    return [
      'No variant stands behind this experiment, so what is lost downstream cannot be told from what is open.'
    ];
  const reasons = new Set<string>();
  for (const { open, refusal } of context.figures.entries.values()) {
    if (!open.available && refusal === null) reasons.add(open.reason);
  }
  const masked = [...context.figures.entries.values()].some(
    ({ open }) => open.available && open.matrixEffect !== null
  );
  const notes = masked
    ? [
        'The stages were made in different media: what the matrix masks of a signal counts with what is lost downstream, as in the stage losses.'
      ]
    : [];
  return reasons.size > 3
    ? [`For ${reasons.size} analytes what is lost downstream cannot be told from what is open.`, ...notes]
    : [...reasons, ...notes];
}

/** The stage ladder of a variant with the finding in a sentence. */
export async function stageLadderView(
  actor: Actor,
  study: string,
  query: SubjectQuery,
  figureLink: FigureLink
): Promise<{
  readonly subject: SubjectView;
  readonly ladder: StageLadderView;
  readonly findings: StageFindings;
}> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, study);
  const subject = subjectOf(figures, query);
  // A ladder can be climbed before its top is measured.
  const [first] = figures.data.variants;
  const context = subject.context ?? (first ? figures.variant(first) : null);
  const link = linkOf(figureLink);
  return {
    subject: subjectView(figures, { ...subject, context }),
    ladder: stageLadderOf(figures, context, link),
    findings: stageFindingsOf(figures, context, link)
  };
}

/** What each stage of a variant takes of 100 in the sample. */
export async function walkBackView(
  actor: Actor,
  study: string,
  query: SubjectQuery,
  figureLink: FigureLink
): Promise<{
  readonly subject: SubjectView;
  readonly walkBack: WalkBackView;
  readonly findings: StageFindings;
}> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, study);
  const subject = subjectOf(figures, query);
  const link = linkOf(figureLink);
  return {
    subject: subjectView(figures, subject),
    walkBack: walkBackOf(figures, subject.context, link),
    findings: stageFindingsOf(figures, subject.context, link)
  };
}

/** Method recoveries of one experiment with verdicts; null where the study has no experiment yet. */
export async function resultsTableView(
  actor: Actor,
  study: string,
  query: SubjectQuery,
  figureLink: FigureLink
): Promise<{ readonly subject: SubjectView; readonly results: ResultsTableView | null }> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, study);
  const subject = subjectOf(figures, query);
  return {
    subject: subjectView(figures, subject),
    results: subject.experiment && resultsTableOf(figures, subject.experiment, linkOf(figureLink))
  };
}

/** Every variant beside the others, analyte by analyte. */
export async function compareView(actor: Actor, study: string, figureLink: FigureLink): Promise<CompareView> {
  require(actor, 'studies.see');
  return compareOf(await figuresOfStudy(actor.labId, study), linkOf(figureLink));
}

/**
 * Surrogates, blanks and matrix effects of one experiment.
 * @throws NotFound when the study has no experiment of this number
 */
export async function surrogatesView(
  actor: Actor,
  study: string,
  experiment: number,
  figureLink: FigureLink
): Promise<PortionsView> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, study);
  return portionsOf(figures, experimentByNumber(figures, experiment), linkOf(figureLink));
}

/**
 * Where a figure comes from, down to file, sheet and cell.
 * @throws Invalid for a text that is no address; NotFound for one that points at nothing in this study
 */
export async function provenanceView(
  actor: Actor,
  study: string,
  address: string,
  figureLink: FigureLink
): Promise<ProvenanceView> {
  require(actor, 'studies.see');
  const parsed = parseAddress(address);
  return provenanceOf(await figuresOfStudy(actor.labId, study), parsed, linkOf(figureLink));
}

/** The experiments of a study to choose one from, in order of their number. */
export async function listExperimentsOf(actor: Actor, study: string): Promise<readonly ExperimentChoice[]> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, study);
  return figures.data.experiments.map((experiment) => experimentChoice(figures, experiment));
}
