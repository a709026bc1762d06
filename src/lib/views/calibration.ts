import type { CalibrationModelName, CalibrationWeighting, PanelRole } from '../domain/vocabulary';
import type { RuleView } from './findings';

export interface CalibrationSetItem {
  readonly id: string;
  readonly name: string;
  readonly instrument: string;
  readonly calibratedOn: string;
  readonly defaultModel: CalibrationModelName;
  readonly defaultWeighting: CalibrationWeighting;
  readonly version: number;
  readonly levels: number;
  /** Entries of the panel that its levels hold. */
  readonly entries: number;
  /** Values that count now. */
  readonly values: number;
  /** Numbers of the experiments that use it. */
  readonly experiments: readonly number[];
}

export interface LevelView {
  readonly id: string;
  readonly number: number;
  readonly label: string;
}

/** One level injection of an analyte and how the line reads it back. */
export interface FitPointView {
  readonly levelId: string;
  readonly levelLabel: string;
  /** Number of this injection among those of its level. */
  readonly injection: number;
  /** ng/mL in the vial. */
  readonly concentration: number | null;
  readonly area: number;
  /** Of the internal standard; null: external. */
  readonly internalArea: number | null;
  /** ng/mL, or the ratio of concentrations. */
  readonly x: number;
  /** Area, or the ratio of areas. */
  readonly y: number;
  /** y/x; null at a level of zero. */
  readonly responseFactor: number | null;
  readonly fitted: number;
  readonly backCalculated: number | null;
  /** 100 (x' - x)/x. */
  readonly errorPercent: number | null;
  /** What the study's criteria hold the error to, percent; null: no rule. */
  readonly limit: number | null;
  /** False where the error passes that; null where there is no rule. */
  readonly holds: boolean | null;
  /** Opens the cell of the file that it came from. */
  readonly href: string;
}

/** A level injection that is no point of the line, and why. */
export interface UnusedPointView {
  readonly levelId: string;
  readonly levelLabel: string;
  readonly why: string;
}

/** A level injection that the line goes without, and what the line would make of it. */
export interface AsidePointView {
  readonly levelLabel: string;
  readonly concentration: number | null;
  readonly x: number;
  readonly y: number;
  readonly backCalculated: number | null;
  readonly errorPercent: number | null;
}

/** A line against one rule. */
export interface FitCheckView extends RuleView {
  /** Which of the rules of the page it is. */
  readonly rule: number;
  readonly holds: boolean;
  /** The figure as it is shown: "12.3", "0.9987", "7"; null: a yes or no. */
  readonly value: string | null;
  /** "L1 reads 24.3 % off". */
  readonly detail: string;
}

/** How an analyte is fitted, as somebody chose it. */
export interface FitChoiceView {
  readonly revision: number;
  readonly model: CalibrationModelName;
  readonly weighting: CalibrationWeighting;
  /** Labels. */
  readonly leftOut: readonly string[];
  readonly by: string;
  readonly at: string;
  readonly reason: string;
}

export interface FitView {
  readonly entryId: string;
  readonly name: string;
  readonly role: PanelRole;
  readonly standardName: string | null;
  /** 0: the set's default. */
  readonly revision: number;
  readonly model: CalibrationModelName;
  readonly weighting: CalibrationWeighting;
  readonly levelsLeftOut: readonly string[];
  /** Who chose it, when and why; null for the default. */
  readonly choice: FitChoiceView | null;
  /** Newest first. */
  readonly earlier: readonly FitChoiceView[];
  /** concentration: area against ng/mL; ratio: area ratio against concentration ratio. Null where there is no line. */
  readonly scale: 'concentration' | 'ratio' | null;
  /** "Area ratio to Standard, straight line, weighted 1/x, over L1 to L8 (0.5 to 200 ng/mL)." */
  readonly sentence: string;
  readonly coefficients: readonly number[];
  readonly r2: number | null;
  readonly rse: number | null;
  readonly responseFactorRsd: number | null;
  readonly range: readonly [number, number] | null;
  /** Levels of different concentration that are used. */
  readonly levelsUsed: number;
  readonly points: readonly FitPointView[];
  readonly unused: readonly UnusedPointView[];
  readonly checks: readonly FitCheckView[];
  /** Why there is no line. */
  readonly refusal: string | null;
}

/** The curve at one x, with its bands at 95 %. */
export interface CurvePointView {
  readonly x: number;
  readonly y: number;
  readonly confidence: readonly [number, number];
  readonly prediction: readonly [number, number] | null;
}

/** One kind of line among those that could be chosen. */
export interface CandidateView {
  readonly model: CalibrationModelName;
  readonly weighting: CalibrationWeighting;
  /** It is what figures are read by now. */
  readonly inForce: boolean;
  readonly refusal: string | null;
  readonly rse: number | null;
  readonly r2: number | null;
  readonly responseFactorRsd: number | null;
  /** Percent, without sign; null where it cannot be drawn. `readsBack` false: the curve never takes the response. */
  readonly worst: { readonly label: string; readonly error: number | null } | null;
  readonly lowestError: number | null;
  readonly levels: number | null;
  readonly levelsNeeded: number;
  readonly degreesOfFreedom: number | null;
  /** Null: it cannot turn. */
  readonly oneWay: boolean | null;
  /** What no response at all reads as, percent of the lowest level. */
  readonly zeroPercent: number | null;
  readonly checks: readonly FitCheckView[];
  readonly speaksFor: readonly string[];
  readonly speaksAgainst: readonly string[];
}

/** What an experiment read on a line. */
export interface ReadingsView {
  readonly experiment: number;
  readonly title: string;
  /** Opens the figure that came of it. */
  readonly href: string;
  /** Injections that were read, and those of them outside the range. */
  readonly readings: number;
  readonly below: number;
  readonly above: number;
  /** Where in the range they lie, in the scale of the line. */
  readonly xs: readonly number[];
}

/** How sure one reading at a level is. */
export interface ReadingWidthView {
  readonly levelLabel: string;
  readonly x: number;
  /** Half of the 95 % interval of x for one injection, in percent of x; null: none exists. */
  readonly percent: number | null;
}

/** One analyte's line with everything that is said of it. */
export interface FitDetailView extends FitView {
  /** Where the response is nothing. */
  readonly intercept: number | null;
  readonly aside: readonly AsidePointView[];
  /** The line that is proposed, and how it reads each point back: by level id and injection. Null: none is, or it cannot be drawn. */
  readonly proposed: {
    readonly sentence: string;
    readonly errors: Readonly<Record<string, number | null>>;
  } | null;
  readonly curve: readonly CurvePointView[];
  readonly widths: readonly ReadingWidthView[];
  readonly candidates: readonly CandidateView[];
  readonly readings: readonly ReadingsView[];
  /** Opens the provenance of the line; null: no experiment uses the set. */
  readonly provenance: string | null;
  /** Neighbours in the list. */
  readonly previous: { readonly entryId: string; readonly name: string } | null;
  readonly next: { readonly entryId: string; readonly name: string } | null;
}

/** A change of the levels, as the history has it. */
export interface LevelChangeView {
  readonly at: string;
  readonly by: string;
  readonly sentence: string;
  readonly reason: string | null;
  readonly rows: readonly { readonly what: string; readonly before: string; readonly after: string }[];
}

export interface CalibrationSetView extends CalibrationSetItem {
  readonly levelList: readonly LevelView[];
  /** ng/mL by panel entry id and level id. */
  readonly concentrations: Readonly<Record<string, Readonly<Record<string, number>>>>;
  /** Panel entries that are in the standards, in panel order. */
  readonly fits: readonly FitView[];
  /** Panel entries that are not. */
  readonly missing: readonly string[];
  /** The rules of the study's criteria that lines are held against. */
  readonly rules: readonly RuleView[];
  readonly criteriaName: string;
  /** Newest first. */
  readonly levelChanges: readonly LevelChangeView[];
}

/** A figure of the study before and after a change that is only proposed. */
export interface MovedFigureView {
  readonly experiment: number;
  readonly experimentTitle: string;
  readonly name: string;
  readonly what: 'method recovery' | 'surrogate recovery' | 'relative recovery';
  readonly before: number | null;
  readonly after: number | null;
  /** Points of percent; null where one of the two does not exist. */
  readonly points: number | null;
  readonly n: readonly [before: number | null, after: number | null];
  readonly verdicts: readonly [before: string | null, after: string | null];
  /** Why there is none, or why the verdict is another. */
  readonly note: string | null;
  readonly href: string;
}

/** Injections of one analyte in one experiment that the change puts on another side of the range. */
export interface RangeMoveView {
  readonly experiment: number;
  readonly name: string;
  /** "2 readings are now above the highest level" */
  readonly text: string;
  /** Figures lose these; the others are gained. */
  readonly worse: boolean;
}

/** What a stage takes of 100 in the sample, before and after a change that is only proposed. */
export interface MovedLossView {
  readonly variant: string;
  readonly stage: string;
  readonly name: string;
  readonly before: number | null;
  readonly after: number | null;
  /** The loss is named: it stands out over the panel. */
  readonly named: readonly [before: boolean, after: boolean];
}

/** What a proposed change of a calibration would do to the study's figures. */
export interface MovesView {
  /** Stands for the data and the proposal that were looked at; the change is stored only while it still does. */
  readonly token: string;
  /** In one sentence. */
  readonly sentence: string;
  readonly moved: readonly MovedFigureView[];
  /** Figures that were compared and stay as they are. */
  readonly unmoved: number;
  readonly verdictChanges: number;
  readonly range: readonly RangeMoveView[];
  /** Losses of the walk-back that move by a tenth of a point at least, or are named or no longer; the largest first. */
  readonly losses: readonly MovedLossView[];
  /** Lines as they would be, against the rules: only those whose standing changes. */
  readonly standings: readonly { readonly name: string; readonly before: string; readonly after: string }[];
}

/** A choice of lines that is only proposed, with what it would do. */
export interface ProposedFitsView {
  readonly model: CalibrationModelName;
  readonly weighting: CalibrationWeighting;
  readonly entries: readonly {
    readonly entryId: string;
    readonly name: string;
    readonly seenRevision: number;
    readonly before: string;
    readonly after: string;
  }[];
  /** Of the entries that would be chosen for, those that are fitted so already. */
  readonly alreadySo: readonly string[];
  readonly moves: MovesView;
}

/** Levels that are only proposed, with what they would do. */
export interface ProposedLevelsView {
  /** Every entry that differs. */
  readonly rows: LevelChangeView['rows'];
  readonly moves: MovesView;
}
