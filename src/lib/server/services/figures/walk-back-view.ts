import type { WalkBackLoss, WalkBackRow, WalkBackView } from '../../../views/walk-back';
import type { EntryInVariant } from '../../amounts/variant-figures';
import type { Link } from './addresses';
import { listed } from './figure-parts';
import type { StudyFigures, VariantContext } from './study-figures';

/** What each stage of a variant takes of 100 in the sample, analyte by analyte, in procedure order. */
export function walkBackOf(figures: StudyFigures, context: VariantContext | null, link: Link): WalkBackView {
  const stages = [...figures.data.stages].reverse().filter((stage) => stage.kind === 'loss');
  return {
    stages: stages.map(({ key, name }) => ({ key, name })),
    rows: context
      ? figures.targets.flatMap((entry) => {
          const item = context.figures.entries.get(entry.id);
          return item ? [rowOf(item, stages, context, link)] : [];
        })
      : []
  };
}

function rowOf(
  item: EntryInVariant,
  stages: readonly { readonly key: string; readonly name: string }[],
  context: VariantContext,
  link: Link
): WalkBackRow {
  const { entry, rows } = item;
  const top = context.top;
  const last = rows.at(-1);
  const signal = rows.find((row) => row.lost === null)?.recovered.estimate ?? 100;
  const recovered = last?.recovered.estimate ?? null;
  return {
    panelEntryId: entry.id,
    name: entry.name,
    losses: stages.map((stage): WalkBackLoss | null => {
      const row = rows.find((candidate) => candidate.stage === stage.key);
      const lost = row?.lost?.estimate ?? null;
      if (!row || lost === null) return null;
      const address = {
        kind: 'loss',
        variant: context.variant.code,
        stage: stage.key,
        entry: entry.id
      } as const;
      return {
        stageKey: stage.key,
        lost,
        interval: row.lost?.ci ?? null,
        pAdjusted: row.pPanel,
        href: link(address)
      };
    }),
    remaining: recovered === null || last?.lost === null || signal <= 0 ? null : (100 * recovered) / signal,
    gap: gapOf(item, stages),
    href: top ? link({ kind: 'recovery', experiment: top.number, entry: entry.id }) : ''
  };
}

function gapOf(
  item: EntryInVariant,
  stages: readonly { readonly key: string; readonly name: string }[]
): string | null {
  if (item.refusal) return item.refusal;
  const nameOf = (key: string): string => stages.find((stage) => stage.key === key)?.name ?? key;
  const parts = item.gaps
    .filter((gap) => stages.some((stage) => stage.key === gap.key))
    .map((gap) => gap.reason);
  for (const row of item.rows) {
    if (row.covers.length === 0) continue;
    const missing = listed(row.covers.map((key) => nameOf(key).toLowerCase()));
    parts.push(`What ${nameOf(row.stage).toLowerCase()} seems to take includes ${missing}.`);
  }
  if (item.rows.some((row) => row.lost !== null && row.lost.estimate === null)) {
    parts.push('Nothing came back at some stage, so the losses cannot be told apart.');
  }
  return parts.length > 0 ? parts.join(' ') : null;
}
