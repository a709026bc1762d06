import { percentText } from '../../../domain/figure-text';
import type { StageFindings } from '../../../views/findings';
import type { EntryInVariant, StageRow } from '../../amounts/variant-figures';
import type { Link } from './addresses';
import { intervalText, listed } from './figure-parts';
import type { StudyFigures, VariantContext } from './study-figures';

interface Named {
  readonly entryId: string;
  readonly name: string;
  /** The stage, after those below it that have no experiment and so are part of its figure. */
  readonly stages: readonly string[];
  readonly row: StageRow;
  readonly below: StageRow | null;
}

/** The finding in a sentence: the worst loss that may be named and how sure it is, then the others, then what is missing. */
export function stageFindingsOf(
  figures: StudyFigures,
  context: VariantContext | null,
  link: Link
): StageFindings {
  if (!context?.top) {
    return {
      lead: 'No variant has been measured from the sample on yet, so nothing can be said about its losses.',
      named: [],
      notes: []
    };
  }
  const all = [...context.figures.entries.values()];
  const stageName = (key: string): string => context.stages.find((stage) => stage.key === key)?.name ?? key;
  const rows = all.flatMap((item) =>
    item.rows.map((row, index): Named => ({
      entryId: item.entry.id,
      name: item.entry.name,
      stages: [...row.covers, row.stage].map(stageName),
      row,
      below: item.rows[index - 1] ?? null
    }))
  );
  const named = rows
    .filter((item) => item.row.named)
    .sort((a, b) => (b.row.lost?.estimate ?? 0) - (a.row.lost?.estimate ?? 0));
  const gone = all.filter((item) => {
    const top = item.rows.at(-1);
    return (
      top?.stage === context.stages.at(-1)?.key &&
      top?.recovered.estimate !== null &&
      (top?.recovered.estimate ?? 0) <= 0
    );
  });
  const [worst] = named;
  const lead =
    gone.length > 0
      ? goneSentence(figures, context, gone)
      : worst
        ? lossSentence(worst)
        : unnamedSentence(rows, context);
  return {
    lead,
    named: named.slice(gone.length > 0 ? 0 : 1, 6).map((item) => ({
      text: lossSentence(item),
      href: link({ kind: 'loss', variant: context.variant.code, stage: item.row.stage, entry: item.entryId })
    })),
    notes: [...notesOf(context, rows), ...flaggedNotes(figures, context)]
  };
}

/** "Nothing of Gabapentin ends in the extract (n = 6); the load effluent holds 99.7 %." */
function goneSentence(
  figures: StudyFigures,
  context: VariantContext,
  gone: readonly EntryInVariant[]
): string {
  const [only] = gone;
  if (gone.length > 1 || !only || !context.top) {
    return `Nothing of ${listed(gone.map((item) => item.entry.name))} ends in the extract.`;
  }
  const found = figures.entry(context.top.id, only.entry.id);
  const n = only.rows.at(-1)?.n ?? 0;
  const elsewhere = found.ready
    ? [...found.balance.fractions].sort((a, b) => b.mean - a.mean).find((item) => item.mean > 10)
    : undefined;
  const place = found.ready
    ? found.input.fractions.find((item) => item.id === elsewhere?.name)?.name.toLowerCase()
    : null;
  const rest = elsewhere && place ? `; the ${place} holds ${percentText(elsewhere.mean)} % of the spike` : '';
  return `Nothing of ${only.entry.name} ends in the extract (n = ${n})${rest}.`;
}

/** "Drying takes 12 points of NDMA (95 %: 8 to 16; n = 7 and 6)." */
function lossSentence({ name, stages, row, below }: Named): string {
  const lost = row.lost?.estimate ?? 0;
  const ci = row.lost?.ci ? `${intervalText(row.lost.ci)}; ` : '';
  const n = below ? `n\u00a0=\u00a0${row.n} and ${below.n}` : `n\u00a0=\u00a0${row.n}`;
  const [first = '', ...others] = stages;
  const who =
    others.length === 0
      ? `${first} takes`
      : `${listed([first, ...others.map((stage) => stage.toLowerCase())])} together take`;
  return `${who} ${percentText(lost)} points of ${name} (${ci}${n}).`;
}

function unnamedSentence(rows: readonly Named[], context: VariantContext): string {
  const [largest] = rows
    .filter((item) => (item.row.lost?.estimate ?? null) !== null)
    .sort((a, b) => (b.row.lost?.estimate ?? 0) - (a.row.lost?.estimate ?? 0));
  if (!largest) return `Of variant ${context.variant.code} no loss can be attributed to a stage yet.`;
  return `No loss of more than 5 points is certain yet; the largest estimate: ${lossSentence(largest)}`;
}

/** One note for each stage whose figures rest on flagged injections, naming the analytes. */
function flaggedNotes(figures: StudyFigures, context: VariantContext): string[] {
  return context.stages.flatMap((stage): string[] => {
    const experiment = stage.evidence?.amounts.experiment;
    if (!experiment) return [];
    const names = figures.targets
      .filter((entry) => figures.flagged(experiment.id, entry.id, 'method') !== null)
      .map(({ name }) => name);
    if (names.length === 0) return [];
    const which = names.length > 6 ? `${names.length} analytes` : listed(names);
    return [
      `${stage.name}: the figures of ${which} in experiment ${experiment.number} rest on flagged injections; open one to see which check speaks against it.`
    ];
  });
}

function notesOf(context: VariantContext, rows: readonly Named[]): string[] {
  const notes: string[] = [];
  if (context.figures.mediaDiffer) {
    const corrected = rows.some((item) => item.row.matrixEffect !== null);
    const media = context.stages.flatMap((stage) =>
      stage.evidence ? [`${stage.name.toLowerCase()} in ${stage.evidence.medium}`] : []
    );
    notes.push(
      `The stages were measured in different media (${media.join(', ')}). ` +
        (corrected
          ? 'Where post-extraction spikes tell the matrix effect, recoveries enter the steps divided by it.'
          : 'No post-extraction spikes tell the matrix effect, so part of a loss may be masking at the detector.')
    );
  }
  const highest = context.stages.findLastIndex((stage) => stage.kind === 'loss' && stage.evidence !== null);
  const above = new Set(context.stages.slice(highest + 1).map((stage) => stage.key));
  const topName = context.stages[highest]?.name.toLowerCase() ?? '';
  for (const stage of context.stages) {
    if (stage.evidence) continue;
    notes.push(
      stage.kind === 'signal'
        ? `No standards stand for ${stage.name.toLowerCase()} yet: recoveries are held against exactly 100, so a bias of the signal reads as a loss.`
        : above.has(stage.key)
          ? `${stage.name} has no experiment yet: losses are points of 100 that reach ${topName}, not of 100 in the sample.`
          : `${stage.name} has no experiment yet: what it takes is part of what the stage above it seems to take.`
    );
  }
  return notes;
}
