import { QueryTypes } from 'sequelize';
import { fitText, r2Text } from '../../domain/calibration-text';
import { percentText } from '../../domain/figure-text';
import { givenText } from '../../domain/given-text';
import type { CalibrationModelName, CalibrationWeighting } from '../../domain/vocabulary';
import type {
  CalibrationSetView,
  FitCheckView,
  FitChoiceView,
  FitPointView,
  FitView
} from '../../views/calibration';
import { calibrate, fitChoiceOf, type Calibration, type CalibrationPoint } from '../amounts/calibration';
import {
  calibrationRules,
  checkCalibration,
  errorLimitAt,
  levelCount,
  type CalibrationCheck
} from '../amounts/calibration-check';
import type { CalibrationSet } from '../amounts/types';
import { sequelize } from '../db/sequelize';
import { NotFound } from '../errors';
import { ruleView } from './figures/figure-parts';
import type { StudyData, StudyPanelEntry } from './figures/study-data';

export type UsableLine = Extract<Calibration, { usable: true }>;

interface ChoiceRow {
  readonly panelEntryId: string;
  readonly revision: number;
  readonly model: CalibrationModelName;
  readonly weighting: CalibrationWeighting;
  readonly levelsLeftOut: readonly string[];
  readonly reason: string;
  readonly by: string;
  readonly at: Date;
}

async function choicesOf(data: StudyData, setId: string): Promise<readonly ChoiceRow[]> {
  return sequelize.query<ChoiceRow>(
    `SELECT f.panel_entry_id AS "panelEntryId", f.revision, f.model, f.weighting, f.levels_left_out AS "levelsLeftOut",
        f.reason, u.name AS by, f.created_at AS at
      FROM calibration_fits f JOIN users u ON u.id = f.chosen_by
      WHERE f.lab_id = $1 AND f.calibration_set_id = $2 ORDER BY f.revision DESC`,
    { bind: [data.labId, setId], type: QueryTypes.SELECT }
  );
}

/** @throws NotFound for a set that the study does not have */
export function setOf<Data extends Pick<StudyData, 'calibrationSets'>>(
  data: Data,
  setId: string
): Data['calibrationSets'][number] {
  const set = data.calibrationSets.find(({ id }) => id === setId);
  if (!set) throw new NotFound();
  return set;
}

/** Names of panel entries, for sentences. */
export function namesIn(data: StudyData): (entryId: string) => string {
  const names = new Map(data.panel.map(({ id, name }) => [id, name]));
  return (id) => names.get(id) ?? 'an analyte off the panel';
}

/**
 * The panel entries that a set can draw a line for, in panel order: an internal standard that is the same in every level has
 * none.
 */
export function fittedEntries(data: StudyData, set: CalibrationSet): readonly StudyPanelEntry[] {
  return data.panel.filter(({ id, role }) => {
    const held = set.levels.map(({ concentrations }) => concentrations.get(id));
    if (held.every((value) => value === undefined)) return false;
    return role === 'target' || role === 'surrogate' || new Set(held).size > 1;
  });
}

function figureOf({ rule, value }: CalibrationCheck): string | null {
  if (value === null) return null;
  const limits = [rule.low, rule.high].filter((limit) => limit !== null);
  if (rule.type === 'determination coefficient') return r2Text(value);
  return rule.unit === 'count' ? givenText(value) : percentText(value, limits);
}

/** A line against the rules of the page. */
export function checkViews(line: UsableLine, rules: StudyData['criteriaSet']['rules']): FitCheckView[] {
  const listed = calibrationRules(rules);
  return checkCalibration(line, rules).map((check) => ({
    ...ruleView(check.rule),
    rule: listed.indexOf(check.rule),
    holds: check.holds,
    value: figureOf(check),
    detail: check.detail
  }));
}

/** What is written down about a point: where it came from and what the line makes of it. */
function pointViews(line: UsableLine, data: StudyData): readonly FitPointView[] {
  const { rules } = data.criteriaSet;
  return line.fit.points.map((point, index) => {
    const { level, reported } = line.points[index] as CalibrationPoint;
    const limit = errorLimitAt(rules, point.x === line.fit.range[0]);
    return {
      levelId: level.id,
      levelLabel: level.label,
      injection: reported.injection,
      concentration: level.concentrations.get(line.entryId) ?? null,
      area: reported.value ?? 0,
      internalArea: line.scale === 'ratio' ? reported.internalArea : null,
      x: point.x,
      y: point.y,
      responseFactor: point.x === 0 ? null : point.y / point.x,
      fitted: point.fitted,
      backCalculated: point.backCalculated,
      errorPercent: point.errorPercent,
      limit,
      holds: limit === null || point.x === 0 ? null : Math.abs(point.errorPercent ?? Infinity) <= limit,
      href: `/studies/${data.code}/data/${reported.importId}?sheet=${reported.sheet - 1}&fromRow=${Math.max(1, reported.row - 5)}`
    };
  });
}

/** "Area ratio to Standard, straight line, weighted 1/x, over L1 to L8 (0.5 to 200 ng/mL)." */
export function lineSentence(
  choice: { readonly model: CalibrationModelName; readonly weighting: CalibrationWeighting },
  line: Calibration,
  standardName: string | null
): string {
  const against = standardName === null ? 'Area, read without a standard' : `Area ratio to ${standardName}`;
  const start = `${against}, ${fitText(choice.model, choice.weighting)}`;
  if (!line.usable) return `${start}.`;
  const held = line.points
    .map(({ level }) => ({ label: level.label, concentration: level.concentrations.get(line.entryId) ?? 0 }))
    .sort((a, b) => a.concentration - b.concentration);
  const [first] = held;
  const last = held.at(-1);
  if (!first || !last) return `${start}.`;
  return `${start}, over ${first.label} to ${last.label} (${givenText(first.concentration)} to ${givenText(last.concentration)} ng/mL).`;
}

function choiceView(row: ChoiceRow, labelOf: (id: string) => string): FitChoiceView {
  const { revision, model, weighting, by, at, reason } = row;
  return {
    revision,
    model,
    weighting,
    leftOut: row.levelsLeftOut.map(labelOf),
    by,
    at: at.toISOString(),
    reason
  };
}

function fitView(
  data: StudyData,
  set: CalibrationSet,
  entry: StudyPanelEntry,
  nameOf: (id: string) => string,
  choices: readonly ChoiceRow[]
): FitView {
  const choice = fitChoiceOf(set, entry.id);
  const line = calibrate(set, entry, nameOf);
  const labels = new Map(set.levels.map(({ id, label }) => [id, label]));
  const labelOf = (id: string): string => labels.get(id) ?? 'a level that was taken out';
  const rows = choices.filter(({ panelEntryId }) => panelEntryId === entry.id);
  const own = rows.find(({ revision }) => revision === choice.revision);
  const fit = line.usable ? line.fit : null;
  const standardName = entry.internalStandardId ? nameOf(entry.internalStandardId) : null;
  return {
    entryId: entry.id,
    name: entry.name,
    role: entry.role,
    standardName,
    revision: choice.revision ?? 0,
    model: choice.model,
    weighting: choice.weighting,
    levelsLeftOut: choice.levelsLeftOut,
    choice: own ? choiceView(own, labelOf) : null,
    earlier: rows.filter((row) => row !== own).map((row) => choiceView(row, labelOf)),
    scale: line.usable ? line.scale : null,
    sentence: lineSentence(choice, line, standardName),
    coefficients: fit?.coefficients ?? [],
    r2: fit?.r2 ?? null,
    rse: fit?.rse ?? null,
    responseFactorRsd: fit?.responseFactorRsd ?? null,
    range: fit?.range ?? null,
    levelsUsed: line.usable ? levelCount(line) : 0,
    points: line.usable ? pointViews(line, data) : [],
    unused: line.usable
      ? line.unused.map(({ level, why }) => ({ levelId: level.id, levelLabel: level.label, why }))
      : [],
    checks: line.usable ? checkViews(line, data.criteriaSet.rules) : [],
    refusal: line.usable ? null : line.reason
  };
}

/** The levels of a set and the fit of every panel entry that they hold, read from the study's figures. */
export async function fitViewsOf(
  data: StudyData,
  setId: string
): Promise<
  Pick<CalibrationSetView, 'levelList' | 'concentrations' | 'fits' | 'missing' | 'rules' | 'criteriaName'>
> {
  const set = setOf(data, setId);
  const nameOf = namesIn(data);
  const choices = await choicesOf(data, setId);
  const inSet = (id: string): boolean => set.levels.some(({ concentrations }) => concentrations.has(id));
  const perEntry = data.panel
    .filter(({ id }) => inSet(id))
    .map(({ id }) => [
      id,
      Object.fromEntries(
        set.levels.flatMap((level) => {
          const value = level.concentrations.get(id);
          return value === undefined ? [] : [[level.id, value]];
        })
      )
    ]);
  return {
    levelList: set.levels.map(({ id, number, label }) => ({ id, number, label })),
    concentrations: Object.fromEntries(perEntry) as CalibrationSetView['concentrations'],
    fits: fittedEntries(data, set).map((entry) => fitView(data, set, entry, nameOf, choices)),
    missing: data.panel.filter(({ id }) => !inSet(id)).map(({ name }) => name),
    rules: calibrationRules(data.criteriaSet.rules).map(ruleView),
    criteriaName: data.criteriaSet.name
  };
}
