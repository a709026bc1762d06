import { figureText } from '../../../domain/figure-text';
import type { SummaryAnalyte, SummaryExperiment, SummaryVariant, SummaryView } from '../../../views/summary';
import { criteriaFor } from '../figures/criteria';
import { countsText, criteriaText } from '../figures/figure-parts';
import type { AnalyteProperty, StudyExperiment, StudyPanelEntry } from '../figures/study-data';
import type { StudyFigures } from '../figures/study-figures';

/** What was planned: panel, variants, stages with their experiments. */

const properties: readonly {
  readonly key: AnalyteProperty;
  readonly label: string;
  readonly unit: string;
}[] = [
  { key: 'formula', label: 'Formula', unit: '' },
  { key: 'molarMass', label: 'Molar mass', unit: 'g/mol' },
  { key: 'logKow', label: 'log Kow', unit: '' },
  { key: 'pkaAcid', label: 'pKa, acid', unit: '' },
  { key: 'pkaBase', label: 'pKa, base', unit: '' },
  { key: 'boilingPointC', label: 'Boiling point', unit: '°C' },
  { key: 'vapourPressurePa', label: 'Vapour pressure', unit: 'Pa' },
  { key: 'henryPaM3Mol', label: 'Henry constant', unit: 'Pa·m³/mol' },
  { key: 'waterSolubilityMgL', label: 'Solubility in water', unit: 'mg/L' }
];

export function analyteView(figures: StudyFigures, entry: StudyPanelEntry): SummaryAnalyte {
  const applied = criteriaFor(figures.data, entry);
  const judged = entry.role === 'target';
  return {
    panelEntryId: entry.id,
    name: entry.name,
    cas: entry.cas,
    role: entry.role,
    class: entry.class ?? '',
    internalStandard: entry.internalStandardId
      ? (figures.entries.get(entry.internalStandardId)?.name ?? null)
      : null,
    criteria: judged
      ? `${criteriaText(applied.criteria)}${applied.overrideReason ? `, of its own: ${applied.overrideReason}` : ''}`
      : '',
    properties: properties.flatMap(({ key, label, unit }) => {
      const value = propertyText(entry.properties[key]);
      return value === null ? [] : [{ label, value, unit, source: sourceOf(entry, key) }];
    })
  };
}

function propertyText(value: StudyPanelEntry['properties'][AnalyteProperty]): string | null {
  if (value === null) return null;
  if (typeof value === 'string') return value === '' ? null : value;
  if (typeof value === 'number') return figureAsGiven(value);
  return value.length === 0 ? null : value.map(figureAsGiven).join(', ');
}

/** A property keeps the digits it was entered with. */
function figureAsGiven(value: number): string {
  return Math.abs(value) < 1e-3 || Math.abs(value) >= 1e6
    ? figureText(value)
    : String(value).replace('-', '\u2212');
}

/** Sources are kept under the property's name, in whichever of the two spellings it was stored. */
function sourceOf(entry: StudyPanelEntry, key: AnalyteProperty): string {
  const spelled = key.replace(/[A-Z]/g, (letter) => `_${letter.toLowerCase()}`);
  return entry.sources[key] ?? entry.sources[spelled] ?? (key === 'formula' ? '' : 'no source recorded');
}

export function variantView(
  figures: StudyFigures,
  variant: StudyFigures['data']['variants'][number]
): SummaryVariant {
  const stageName = new Map(figures.data.stages.map((stage) => [stage.key, stage.name]));
  return {
    code: variant.code,
    name: variant.name,
    description: variant.description,
    steps: variant.steps.map((step) => ({
      stage: stageName.get(step.stageKey) ?? step.stageKey,
      kind: step.kind,
      instruction: step.instruction,
      parameters: parameterText(step.parameters)
    }))
  };
}

const parameterWords: Readonly<Record<string, (value: string | number) => string>> = {
  ph: (value) => `pH ${value}`,
  solvent: (value) => String(value),
  volumeMl: (value) => `${value} mL`,
  minutes: (value) => `${value} min`,
  temperatureC: (value) => `${value} °C`
};

function parameterText(parameters: Readonly<Record<string, unknown>>): string {
  return Object.entries(parameters)
    .flatMap(([key, value]) =>
      typeof value === 'number' || (typeof value === 'string' && value !== '')
        ? [parameterWords[key]?.(value) ?? `${key} ${value}`]
        : []
    )
    .join(', ');
}

export function stageViews(figures: StudyFigures): SummaryView['stages'] {
  return figures.data.stages.map((stage) => ({
    number: stage.position,
    name: stage.name,
    experiments: figures.data.experiments
      .filter((item) => item.stageKey === stage.key)
      .map((item) => experimentView(figures, item))
  }));
}

function experimentView(figures: StudyFigures, experiment: StudyExperiment): SummaryExperiment {
  const { data } = figures;
  return {
    number: experiment.number,
    title: experiment.title,
    href: `/studies/${data.code}/experiments/${experiment.number}`,
    portions: countsText(experiment.replicates),
    medium: experiment.medium,
    matrix: experiment.matrix ?? '',
    level: experiment.levelLabel,
    subtracts: experiment.subtract === 'none' ? 'nothing' : experiment.subtract,
    performedOn: experiment.performedOn,
    analyst: experiment.analystName,
    calibration: data.calibrationSets.find((set) => set.id === experiment.calibrationSetId)?.name ?? null,
    standsFor: data.variants
      .filter((variant) => variant.evidence.some((item) => item.experimentId === experiment.id))
      .map((variant) => variant.code),
    fractions: experiment.fractions.map((fraction) => `${fraction.name} (${fraction.countsAs})`)
  };
}
