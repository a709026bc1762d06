import { figureText } from '../../../../domain/figure-text';
import type { ProvenanceTable, ProvenanceView } from '../../../../views/provenance';
import type { Calibration } from '../../../amounts/calibration';
import { checkCalibration } from '../../../amounts/calibration-check';
import { addressText, type Link } from '../addresses';
import { ruleView } from '../figure-parts';
import type { StudyExperiment, StudyPanelEntry } from '../study-data';
import type { StudyFigures } from '../study-figures';
import { lineFormula } from './formulas';
import { blankLevel, choiceText, input, sourceCell } from './parts';

/** One analyte's line: choice, coefficients, levels back-calculated, rules held against it, cells of the levels. */
export function calibrationProvenance(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  link: Link
): ProvenanceView {
  const calibration = figures.amounts(experiment.id).calibrationOf(entry.id);
  const address = { kind: 'calibration', experiment: experiment.number, entry: entry.id } as const;
  const base = {
    ...blankLevel,
    address: addressText(address),
    panelEntryId: entry.id,
    title: `${entry.name}, calibration`,
    up: { label: 'Method recovery', href: link({ ...address, kind: 'recovery' }) }
  };
  if (!calibration.usable) return { ...base, missing: calibration.reason };
  const { fit, choice, set, points, unused } = calibration;
  const checks = checkCalibration(calibration, figures.data.criteriaSet.rules);
  const failed = checks.filter((check) => !check.holds);
  const standard = calibration.standardId ? figures.entries.get(calibration.standardId)?.name : null;
  return {
    ...base,
    ...lineFormula(choice),
    verdict:
      checks.length === 0
        ? null
        : failed.length === 0
          ? { verdict: 'inside', detail: checks.map((check) => check.detail).join('; ') }
          : { verdict: 'outside', detail: failed.map((check) => check.detail).join('; ') },
    sentences: [
      `${set.name}, ${choiceText(choice)}.`,
      standard
        ? `y is the area over that of ${standard}, x the ratio q of their concentrations.`
        : 'y is the area, x the concentration in the vial, ng/mL.',
      ...checks.map((check) => {
        const rule = ruleView(check.rule);
        return `${rule.what} ${rule.limits}: ${check.detail}. ${rule.citation}.`;
      })
    ],
    inputs: [
      input('Calibration set', set.name, '', {
        href: `/studies/${figures.data.code}/calibration/${set.id}?analyte=${entry.id}#fit`
      }),
      ...fit.coefficients.map((value, index) =>
        input(
          choice.model === 'average response factor' ? 'Average response factor' : `Coefficient b${index}`,
          value,
          ''
        )
      ),
      ...(fit.r2 === null ? [] : [input('Coefficient of determination, r²', fit.r2.toFixed(5), '')]),
      input('Relative standard error of the levels', fit.rse, '%'),
      input(
        'Range',
        `${figureText(fit.range[0])} to ${figureText(fit.range[1])}`,
        calibration.scale === 'ratio' ? '' : 'ng/mL'
      )
    ],
    tables: [levelTable(calibration)],
    cells: points.map((point) => sourceCell(figures, point.reported)),
    setAside: unused.map((item) => ({ text: `${item.level.label} is no point of the line: ${item.why}.` }))
  };
}

function levelTable({ fit, points, scale }: Extract<Calibration, { usable: true }>): ProvenanceTable {
  return {
    caption: 'Levels',
    columns: [
      { key: 'x', label: scale === 'ratio' ? 'q' : 'x', unit: scale === 'ratio' ? null : 'ng/mL' },
      { key: 'y', label: scale === 'ratio' ? 'Area ratio' : 'Area', unit: null },
      { key: 'back', label: 'Reads', unit: scale === 'ratio' ? null : 'ng/mL' },
      { key: 'error', label: 'Off by', unit: '%' }
    ],
    rows: points.map((point, index) => {
      const fitted = fit.points[index];
      const text = (value: number | null | undefined): string | null =>
        value === null || value === undefined ? null : figureText(value);
      return {
        key: point.reported.id,
        label: point.level.label,
        cells: [point.x, point.y, fitted?.backCalculated, fitted?.errorPercent].map((value) => ({
          text: text(value),
          href: null,
          note: null
        })),
        setAside: null
      };
    })
  };
}
