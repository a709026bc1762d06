import { dayText } from '../../../domain/moment-text';
import type { SummaryCalibration, SummaryExclusion, SummaryImport } from '../../../views/summary';
import { calibrate } from '../../amounts/calibration';
import { checkCalibration } from '../../amounts/calibration-check';
import type { Link } from '../figures/addresses';
import { choiceText } from '../figures/provenance/parts';
import type { ExclusionRecord, StudyCalibrationSet, StudyPanelEntry } from '../figures/study-data';
import type { StudyFigures } from '../figures/study-figures';

/** What the record holds beside the figures: calibrations, exclusions, files. */

export function calibrationView(
  figures: StudyFigures,
  set: StudyCalibrationSet,
  link: Link
): SummaryCalibration {
  // Through the first experiment that uses the set, so that the line opens with the figures it serves.
  const experiment = figures.data.experiments.find((item) => item.calibrationSetId === set.id);
  const calibrated = figures.data.panel.filter((entry) =>
    set.reported.some((item) => item.entryId === entry.id)
  );
  return {
    name: set.name,
    instrument: set.instrument,
    calibratedOn: set.calibratedOn,
    levels: set.levels.length,
    rows: calibrated.map((entry) => ({
      ...lineOf(figures, set, entry),
      panelEntryId: entry.id,
      name: entry.name,
      href: experiment ? link({ kind: 'calibration', experiment: experiment.number, entry: entry.id }) : null
    }))
  };
}

type Line = Pick<SummaryCalibration['rows'][number], 'choice' | 'points' | 'r2' | 'rse' | 'says' | 'holds'>;

function lineOf(figures: StudyFigures, set: StudyCalibrationSet, entry: StudyPanelEntry): Line {
  const nameOf = (id: string): string => figures.entries.get(id)?.name ?? 'an analyte no longer on the panel';
  const line = calibrate(set, entry, nameOf);
  if (!line.usable) return { choice: '', points: null, r2: null, rse: null, says: line.reason, holds: null };
  const checks = checkCalibration(line, figures.data.criteriaSet.rules);
  return {
    choice: choiceText(line.choice),
    points: line.points.length,
    r2: line.fit.r2,
    rse: line.fit.rse,
    says: checks.map((check) => check.detail).join('; ') || 'no rule to hold it against',
    holds: checks.length === 0 ? null : checks.every((check) => check.holds)
  };
}

export function exclusionView(figures: StudyFigures, record: ExclusionRecord): SummaryExclusion {
  const { data, entries } = figures;
  const experiment = data.experiments.find((item) => item.id === record.experimentId);
  const replicate =
    experiment?.replicates.find((item) => item.id === record.replicateId)?.label ?? 'a portion';
  const fraction = experiment?.fractions.find((item) => item.id === record.fractionId)?.name;
  const analyte =
    record.entryId === null
      ? null
      : (entries.get(record.entryId)?.name ?? 'an analyte no longer on the panel');
  return {
    experiment: experiment?.number ?? 0,
    what: [replicate, ...(fraction ? [fraction] : []), ...(analyte ? [analyte] : [])].join(', '),
    cause: record.cause,
    by: record.by,
    at: record.at,
    lifted:
      record.lifted && `lifted by ${record.lifted.by}, ${dayText(record.lifted.at)}: ${record.lifted.reason}`,
    href: `/studies/${data.code}/experiments/${experiment?.number ?? ''}`
  };
}

export function importViews(figures: StudyFigures): SummaryImport[] {
  return figures.data.imports.map((item) => ({
    fileName: item.fileName,
    sha256: item.sha256,
    byteSize: item.byteSize,
    state: item.state,
    storedAt: item.storedAt,
    storedBy: item.storedBy,
    endReason: item.endReason,
    href: `/studies/${figures.data.code}/data/${item.id}`
  }));
}
