import type {
  AsidePointView,
  CandidateView,
  CurvePointView,
  FitDetailView,
  FitView,
  ReadingsView,
  ReadingWidthView
} from '../../views/calibration';
import { calibrate } from '../amounts/calibration';
import { calibrationCandidates, type Candidate } from '../amounts/calibration-candidates';
import { isSameFit, withChoices, type ProposedFit } from '../amounts/calibration-proposal';
import type { CalibrationSet } from '../amounts/types';
import { curveBand, readingHalfWidth, solveCalibration } from '../stats';
import { checkViews, lineSentence, namesIn, setOf, type UsableLine } from './calibration-fits';
import { injectionsRead } from './calibration-readings';
import { addressText, type FigureAddress } from './figures/addresses';
import type { StudyData, StudyPanelEntry } from './figures/study-data';
import type { StudyFigures } from './figures/study-figures';

/** Places along the range at which the curve is drawn: evenly, and evenly on a logarithmic axis. */
const steps = 40;

function curveOf({ fit, points }: UsableLine): readonly CurvePointView[] {
  const [low, high] = fit.range;
  const even = Array.from({ length: steps + 1 }, (_, step) => low + ((high - low) * step) / steps);
  const logarithmic = low > 0 ? even.map((_, step) => low * (high / low) ** (step / steps)) : [];
  const xs = [...new Set([...even, ...logarithmic, ...points.map(({ x }) => x)])]
    .filter((x) => x >= low && x <= high)
    .sort((a, b) => a - b);
  return curveBand(fit, xs).map(({ x, height, confidence, prediction }) => ({
    x,
    y: height,
    confidence: [confidence.lower, confidence.upper],
    prediction: prediction && [prediction.lower, prediction.upper]
  }));
}

function widthsOf(line: UsableLine): readonly ReadingWidthView[] {
  const byX = new Map(line.points.map(({ x, level }) => [x, level.label]));
  return [...byX]
    .sort(([a], [b]) => a - b)
    .map(([x, levelLabel]) => {
      const half = x > 0 ? readingHalfWidth(line.fit, x) : null;
      return { levelLabel, x, percent: half === null ? null : (100 * half) / x };
    });
}

const finiteOrNull = (value: number | null): number | null =>
  value !== null && Number.isFinite(value) ? value : null;

function candidateView(
  candidate: Candidate,
  current: FitView,
  rules: StudyData['criteriaSet']['rules']
): CandidateView {
  const fit = candidate.line?.fit ?? null;
  return {
    model: candidate.fit.model,
    weighting: candidate.fit.weighting,
    inForce: isSameFit(candidate.fit, current),
    refusal: candidate.refusal,
    rse: fit?.rse ?? null,
    r2: fit?.r2 ?? null,
    responseFactorRsd: fit?.model === 'average response factor' ? fit.responseFactorRsd : null,
    worst: candidate.worst && { label: candidate.worst.label, error: finiteOrNull(candidate.worst.error) },
    lowestError: finiteOrNull(candidate.lowestError),
    levels: candidate.levels,
    levelsNeeded: candidate.levelsNeeded,
    degreesOfFreedom: fit?.df ?? null,
    oneWay: candidate.oneWay,
    zeroPercent: fit?.model === 'average response factor' ? null : (candidate.zero?.percent ?? null),
    checks: candidate.line ? checkViews(candidate.line, rules) : [],
    speaksFor: candidate.speaksFor,
    speaksAgainst: candidate.speaksAgainst
  };
}

function readingsOf(figures: StudyFigures, setId: string, entryId: string): readonly ReadingsView[] {
  return figures.data.experiments
    .filter(({ calibrationSetId }) => calibrationSetId === setId)
    .flatMap((experiment): ReadingsView[] => {
      const read = injectionsRead(figures.amounts(experiment.id), entryId);
      if (read.length === 0) return [];
      const address: FigureAddress = {
        kind: figures.entries.get(entryId)?.role === 'surrogate' ? 'surrogate' : 'recovery',
        experiment: experiment.number,
        entry: entryId
      };
      return [
        {
          experiment: experiment.number,
          title: experiment.title,
          href: `/studies/${figures.data.code}/balance?experiment=${experiment.number}&figure=${addressText(address)}`,
          readings: read.length,
          below: read.filter(({ side }) => side === 'below').length,
          above: read.filter(({ side }) => side === 'above').length,
          xs: read.flatMap(({ x }) => (x === null ? [] : [x]))
        }
      ];
    });
}

/** What a line goes without, read back on it all the same. */
function asideOf(
  line: UsableLine,
  set: CalibrationSet,
  entry: StudyPanelEntry,
  nameOf: (id: string) => string
): readonly AsidePointView[] {
  const leftOut = line.choice.levelsLeftOut;
  if (leftOut.length === 0) return [];
  const { model, weighting } = line.choice;
  const whole = calibrate(
    withChoices(set, new Map([[entry.id, { model, weighting, levelsLeftOut: [] }]])),
    entry,
    nameOf
  );
  if (!whole.usable) return [];
  return whole.points
    .filter(({ level }) => leftOut.includes(level.id))
    .map(({ x, y, level }) => {
      const read = solveCalibration(line.fit, y).x;
      return {
        levelLabel: level.label,
        concentration: level.concentrations.get(entry.id) ?? null,
        x,
        y,
        backCalculated: read,
        errorPercent: read === null || x === 0 ? null : (100 * (read - x)) / x
      };
    });
}

function proposedOf(
  set: CalibrationSet,
  entry: StudyPanelEntry,
  nameOf: (id: string) => string,
  fit: ProposedFit | null
): FitDetailView['proposed'] {
  if (!fit) return null;
  const line = calibrate(withChoices(set, new Map([[entry.id, fit]])), entry, nameOf);
  if (!line.usable) return null;
  const standard = entry.internalStandardId ? nameOf(entry.internalStandardId) : null;
  return {
    sentence: lineSentence(fit, line, standard),
    errors: Object.fromEntries(
      line.points.map(({ level, reported }, index) => [
        `${level.id} ${reported.injection}`,
        line.fit.points[index]?.errorPercent ?? null
      ])
    )
  };
}

/**
 * One analyte's line with its curve, the candidates beside it and what was read on it; null: the set draws no line for it.
 * @param proposed a line that somebody thinks of; the candidates then go without the same levels
 */
export function fitDetailOf(
  figures: StudyFigures,
  fits: readonly FitView[],
  setId: string,
  entryId: string,
  proposed: ProposedFit | null
): FitDetailView | null {
  const index = fits.findIndex((fit) => fit.entryId === entryId);
  const view = fits[index];
  const entry = figures.entries.get(entryId);
  if (!view || !entry) return null;
  const set = setOf(figures.data, setId);
  const nameOf = namesIn(figures.data);
  const { rules } = figures.data.criteriaSet;
  const line = calibrate(set, entry, nameOf);
  const user = figures.data.experiments.find(({ calibrationSetId }) => calibrationSetId === setId);
  const named = (fit: FitView | undefined) => (fit ? { entryId: fit.entryId, name: fit.name } : null);
  return {
    ...view,
    intercept:
      line.usable && line.fit.model !== 'average response factor' ? (line.fit.coefficients[0] ?? null) : null,
    aside: line.usable ? asideOf(line, set, entry, nameOf) : [],
    proposed: proposedOf(set, entry, nameOf, proposed),
    curve: line.usable ? curveOf(line) : [],
    widths: line.usable ? widthsOf(line) : [],
    candidates: calibrationCandidates(set, entry, nameOf, rules, proposed?.levelsLeftOut).map((candidate) =>
      candidateView(candidate, view, rules)
    ),
    readings: readingsOf(figures, setId, entryId),
    provenance: user ? addressText({ kind: 'calibration', experiment: user.number, entry: entryId }) : null,
    previous: named(fits[index - 1]),
    next: named(fits[index + 1])
  };
}
