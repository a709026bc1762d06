import { dayText } from '../../../domain/moment-text';
import { listed, plainEnd } from '../figures/figure-parts';
import type {
  LookAt,
  SummaryExclusion,
  SummaryFindings,
  SummaryImport,
  SummaryView
} from '../../../views/summary';

/** What a reviewer looks at first. */
export function lookAtOf(
  findings: readonly SummaryFindings[],
  exclusions: readonly SummaryExclusion[],
  imports: readonly SummaryImport[],
  stages: SummaryView['stages'],
  missing: readonly LookAt['items'][number][]
): LookAt[] {
  return [
    {
      title: 'Deviations',
      items: deviations(findings),
      none: findings.some(({ results }) => results.rows.some(({ verdict }) => verdict !== null))
        ? 'No figure is outside its criteria.'
        : 'No figure was held against criteria yet.'
    },
    {
      title: 'Flagged figures',
      items: flaggedFigures(findings),
      none: 'No figure rests on a flagged injection.'
    },
    {
      title: 'Exclusions',
      items: exclusions
        .filter((item) => item.lifted === null)
        .map((item) => ({
          text: `Experiment ${item.experiment}, ${item.what}: ${plainEnd(item.cause)} (${item.by}, ${dayText(item.at)})`,
          href: item.href
        })),
      none: 'Nothing is set aside.'
    },
    {
      title: 'Gaps',
      items: gaps(findings, stages, missing),
      none: 'Every stage has its experiment, every portion is complete.'
    },
    {
      title: 'Late changes',
      items: lateChanges(exclusions, imports),
      none: 'Nothing was withdrawn, superseded or lifted.'
    }
  ];
}

function deviations(findings: readonly SummaryFindings[]): LookAt['items'] {
  return findings.flatMap((of) => {
    const outside = of.results.rows.filter((row) => row.verdict === 'outside');
    const surrogates = of.portions.surrogates.flatMap((row) => {
      const where = of.portions.portions.filter(
        (_, index) => row.cells[index]?.holds === false && !row.cells[index].setAside
      );
      return where.length === 0
        ? []
        : [
            {
              text: `${shortName(of)}: surrogate ${row.name} is outside in ${where.map((portion) => portion.label).join(', ')}`,
              href: row.href
            }
          ];
    });
    return [...outsideItems(of, outside), ...surrogates];
  });
}

function flaggedFigures(findings: readonly SummaryFindings[]): LookAt['items'] {
  return findings.flatMap((of) =>
    [...of.results.rows, ...of.portions.surrogates]
      .filter((row) => row.flagged !== null)
      .map((row) => ({ text: `${shortName(of)}: ${row.name} ${row.flagged ?? ''}`, href: row.href }))
  );
}

/** One by one while they are few; many stand in one line that leads to their table. */
function outsideItems(of: SummaryFindings, outside: SummaryFindings['results']['rows']): LookAt['items'] {
  const few = 3;
  if (outside.length <= few) {
    return outside.map((row) => ({
      text: `${shortName(of)}: ${row.name} is outside (${row.reasons.join('; ')})`,
      href: row.href
    }));
  }
  const names = listed(outside.map((row) => row.name));
  return [
    {
      text: `${shortName(of)}: ${outside.length} analytes are outside: ${names}`,
      href: `#findings-${of.key}`
    }
  ];
}

/** "Variant D" or "Experiment 9". */
function shortName({ heading }: SummaryFindings): string {
  return heading.split(',')[0] ?? heading;
}

function gaps(
  findings: readonly SummaryFindings[],
  stages: SummaryView['stages'],
  missing: LookAt['items']
): LookAt['items'] {
  const empty = stages
    .filter((stage) => stage.experiments.length === 0)
    .map((stage) => `${stage.name} has no experiment.`);
  const unjudged = findings.flatMap((of) =>
    of.results.rows
      .filter((row) => row.verdict === null || row.verdict === 'too few')
      .map((row) => ({
        text: `${shortName(of)}: ${row.name}, ${row.reasons.join('; ') || 'no verdict'}`,
        href: row.href
      }))
  );
  const incomplete = findings.flatMap((of) =>
    of.balance.rows
      .filter((row) => row.incomplete !== null)
      .map((row) => ({ text: `${shortName(of)}: ${row.name}, ${row.incomplete ?? ''}`, href: row.href }))
  );
  return [...empty.map((text) => ({ text, href: null })), ...missing, ...unjudged, ...grouped(incomplete)];
}

/** One line for a portion that many analytes lack: thirty lines about one vial hide the rest. */
function grouped(items: readonly { readonly text: string; readonly href: string | null }[]): LookAt['items'] {
  const few = 6;
  if (items.length <= few) return items;
  return [...items.slice(0, few), { text: `and ${items.length - few} more incomplete balances`, href: null }];
}

function lateChanges(
  exclusions: readonly SummaryExclusion[],
  imports: readonly SummaryImport[]
): LookAt['items'] {
  return [
    ...imports
      .filter((item) => item.state !== 'stored')
      .map((item) => ({
        text: `${item.fileName} was ${item.state}: ${item.endReason ?? ''}`,
        href: item.href
      })),
    ...exclusions
      .filter((item) => item.lifted !== null)
      .map((item) => ({
        text: `Experiment ${item.experiment}, ${item.what}: ${item.lifted ?? ''}`,
        href: item.href
      }))
  ];
}
