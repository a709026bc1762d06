import type { CompareCell, CompareVariant, CompareView } from '../../../views/findings';
import { verdicts, type Verdict } from '../../../views/verdict';
import type { Link } from './addresses';
import { criteriaFor, limitsOf } from './criteria';
import { halfWidth, intervalOf } from './figure-parts';
import type { StudyPanelEntry, StudyVariant } from './study-data';
import { flaggedText } from './flagged-text';
import type { StudyFigures, VariantContext } from './study-figures';
import { experimentChoice } from './subject';

/** Analytes down, variants across: what each variant's extract holds of each analyte, and what the variant asks for. */
export function compareOf(figures: StudyFigures, link: Link): CompareView {
  const contexts = figures.data.variants.map((variant) => figures.variant(variant));
  const cells = new Map(
    contexts.map((context) => [
      context,
      figures.targets.map((entry) => cellOf(figures, context, entry, link))
    ])
  );
  return {
    variants: contexts.map((context) => variantView(figures, context, cells.get(context) ?? [])),
    rows: figures.targets.map((entry, index) => {
      const across = contexts.map((context) => cells.get(context)?.[index] ?? 'no experiment');
      return {
        panelEntryId: entry.id,
        name: entry.name,
        class: entry.class ?? '',
        cells: across.map((cell) => (typeof cell === 'string' ? null : cell)),
        gaps: across.map((cell) => (typeof cell === 'string' ? cell : null))
      };
    })
  };
}

function cellOf(
  figures: StudyFigures,
  context: VariantContext,
  entry: StudyPanelEntry,
  link: Link
): CompareCell | string {
  const { whole } = context;
  if (!whole) return context.top ? 'not spiked in the sample yet' : 'not measured yet';
  const found = figures.entry(whole.id, entry.id);
  if (!found.ready) return found.reason;
  const { method } = found.balance;
  if (!method) return found.reasons.join('; ');
  return {
    mean: method.mean,
    limits: limitsOf(criteriaFor(figures.data, entry).criteria).mean,
    halfWidth: halfWidth(intervalOf(method)),
    n: method.n,
    verdict: found.verdict,
    reason: found.reasons.join('; '),
    flagged: flaggedText(figures, whole, entry),
    href: link({ kind: 'recovery', experiment: whole.number, entry: entry.id })
  };
}

function variantView(
  figures: StudyFigures,
  context: VariantContext,
  cells: readonly (CompareCell | string)[]
): CompareVariant {
  const formed = cells.filter((cell) => typeof cell !== 'string');
  const counts = Object.fromEntries(
    verdicts.map((verdict) => [verdict, formed.filter((cell) => cell.verdict === verdict).length])
  ) as Record<Verdict, number>;
  const names = figures.targets.map((entry) => entry.name);
  return {
    code: context.variant.code,
    name: context.variant.name,
    experiment: context.whole && experimentChoice(figures, context.whole),
    counts,
    withoutVerdict: context.whole ? cells.length - formed.filter((cell) => cell.verdict !== null).length : 0,
    worst: worstOf(cells, names),
    solventMl: sumOver(context.variant, (parameters) =>
      typeof parameters.solvent === 'string' && !/^\s*(?:\w+\s+)?water\s*$/i.test(parameters.solvent)
        ? parameters.volumeMl
        : null
    ),
    minutes: sumOver(context.variant, (parameters) => parameters.minutes)
  };
}

/** The lowest recovery, with the first analyte that has it and how many more do: nothing found of nine is not one of nine. */
function worstOf(
  cells: readonly (CompareCell | string)[],
  names: readonly string[]
): CompareVariant['worst'] {
  const means = cells.map((cell) => (typeof cell === 'string' ? Infinity : cell.mean));
  const lowest = means.reduce((least, mean) => Math.min(least, mean), Infinity);
  if (lowest === Infinity) return null;
  const others = means.filter((mean) => mean === lowest).length - 1;
  return { name: names[means.indexOf(lowest)] ?? '', mean: lowest, others };
}

/** Sum of a figure over the written steps; null where no step states it. */
function sumOver(
  variant: StudyVariant,
  figure: (parameters: Readonly<Record<string, unknown>>) => unknown
): number | null {
  const stated = variant.steps
    .map((step) => figure(step.parameters))
    .filter((value) => typeof value === 'number');
  return stated.length === 0 ? null : stated.reduce((sum, value) => sum + value, 0);
}
