import { figureText, percentText } from '../../../../domain/figure-text';
import type { ProvenanceInput, ProvenanceView } from '../../../../views/provenance';
import { addressText, type Link } from '../addresses';
import { halfWidth, intervalText } from '../figure-parts';
import type { StudyPanelEntry } from '../study-data';
import type { StudyFigures, VariantContext } from '../study-figures';
import { lossFormula, openFormula, signalFormula } from './formulas';
import { blankLevel, input } from './parts';

/** What one stage takes of one analyte: the recoveries of the stages it was formed from. */
export function lossProvenance(
  figures: StudyFigures,
  context: VariantContext,
  stageKey: string,
  entry: StudyPanelEntry,
  link: Link
): ProvenanceView | null {
  const stage = context.stages.find((item) => item.key === stageKey);
  const item = context.figures.entries.get(entry.id);
  if (!stage || !item) return null;
  const address = { kind: 'loss', variant: context.variant.code, stage: stageKey, entry: entry.id } as const;
  const base = {
    ...blankLevel,
    address: addressText(address),
    panelEntryId: entry.id,
    title: `${entry.name}, ${stage.name.toLowerCase()}`
  };
  const index = item.rows.findIndex((row) => row.stage === stageKey);
  const row = item.rows[index];
  if (!row) {
    const reason =
      item.refusal ??
      item.gaps.find((gap) => gap.key === stageKey)?.reason ??
      'There is no figure for this stage.';
    return { ...base, missing: reason };
  }
  const numberOf = (key: string): number | null => experimentNumber(figures, context, key);
  const recoveryInput = (key: string, label: string, estimate: number | null, n: number): ProvenanceInput => {
    const number = numberOf(key);
    return input(label, estimate === null ? null : percentText(estimate), '%', {
      note: `n = ${n}${number === null ? '' : `, experiment ${number}`}`,
      href: number === null ? null : link({ kind: 'recovery', experiment: number, entry: entry.id })
    });
  };
  const nameOf = (key: string): string =>
    context.stages.find((candidate) => candidate.key === key)?.name ?? key;

  if (stage.kind === 'signal') {
    const bias = row.recovered.estimate;
    return {
      ...base,
      title: `${entry.name}, signal on the instrument`,
      figure:
        bias === null
          ? null
          : {
              value: percentText(bias),
              unit: '%',
              halfWidth: halfText(row.recovered.ci),
              level: 95,
              n: String(row.n)
            },
      ...signalFormula,
      sentences: [
        'The instrument loses nothing: what standards read, in percent of what they hold, is the reference that the other stages are held against.'
      ],
      inputs: [recoveryInput(stageKey, `${stage.name}, standards`, bias, row.n)]
    };
  }
  const before = item.rows[index - 1] ?? null;
  const top = item.rows.at(-1);
  const lost = row.lost?.estimate ?? null;
  return {
    ...base,
    figure:
      lost === null
        ? null
        : {
            value: percentText(lost),
            unit: 'points of 100',
            halfWidth: halfText(row.lost?.ci ?? null),
            level: row.lost?.ci ? 95 : null,
            n: String(row.n)
          },
    missing:
      lost === null
        ? `Nothing of ${entry.name} came back when it was spiked here or upstream, so a share of the loss cannot be formed.`
        : null,
    ...lossFormula,
    sentences: [
      ...(row.lost?.ci
        ? [`Of 100 in the sample this stage takes ${percentText(lost ?? 0)} (${intervalText(row.lost.ci)}).`]
        : []),
      row.named
        ? 'The loss stands out: p adjusted over stages and panel is below 0.05 and its lower bound passes 5 points.'
        : 'The loss is not named: it would need an adjusted p below 0.05 and a lower bound above 5 points.',
      ...(row.covers.length > 0
        ? [
            `It includes what ${row.covers.map((key) => nameOf(key).toLowerCase()).join(' and ')} takes, which has no experiment of its own.`
          ]
        : []),
      ...(row.matrixEffect === null
        ? []
        : [
            `Recoveries were divided by the matrix effect of ${percentText(row.matrixEffect)} % (100 = none).`
          ]),
      ...(context.figures.mediaDiffer ? ['The stages were measured in different media.'] : [])
    ],
    inputs: [
      recoveryInput(
        row.stage,
        `R_k, spiked at ${nameOf(row.stage).toLowerCase()}`,
        row.recovered.estimate,
        row.n
      ),
      before
        ? recoveryInput(
            before.stage,
            `R_k−1, spiked at ${nameOf(before.stage).toLowerCase()}`,
            before.recovered.estimate,
            before.n
          )
        : input('R_k−1', '100', '%', { note: 'exactly: no standards were measured on the instrument' }),
      ...(top && top !== row
        ? [
            recoveryInput(
              top.stage,
              `R_K, spiked at ${nameOf(top.stage).toLowerCase()}`,
              top.recovered.estimate,
              top.n
            )
          ]
        : []),
      input('Step recovery, R_k / R_k−1', row.stepRecovery.estimate, '', {
        note: row.stepRecovery.ci
          ? `95 %: ${figureText(row.stepRecovery.ci.lower)} to ${figureText(row.stepRecovery.ci.upper)}`
          : null
      }),
      input(
        'Curing this stage alone would bring',
        row.regain === null ? null : percentText(row.regain),
        'points'
      ),
      input('p, two-sided', pText(row.p), ''),
      input('p, adjusted over stages (Holm)', pText(row.pAdjusted), ''),
      input('p, adjusted over the panel too (Benjamini-Hochberg)', pText(row.pPanel), '')
    ]
  };
}

/** What was found, what was lost on the way and what is open of one analyte. */
export function openProvenance(
  figures: StudyFigures,
  context: VariantContext,
  entry: StudyPanelEntry,
  link: Link
): ProvenanceView | null {
  const item = context.figures.entries.get(entry.id);
  const { top } = context;
  if (!item || !top) return null;
  const address = { kind: 'open', variant: context.variant.code, entry: entry.id } as const;
  const base = {
    ...blankLevel,
    address: addressText(address),
    panelEntryId: entry.id,
    title: `${entry.name}, what is open`,
    up: {
      label: 'Method recovery',
      href: link({ kind: 'recovery', experiment: top.number, entry: entry.id })
    }
  };
  if (!item.open.available) return { ...base, missing: item.open.reason };
  const { found, downstream, open, significant } = item.open;
  const points = (value: number | null): string | null => (value === null ? null : percentText(value));
  return {
    ...base,
    figure:
      open.estimate === null
        ? null
        : {
            value: percentText(open.estimate),
            unit: 'points of 100',
            halfWidth: halfText(open.ci),
            level: open.ci ? 95 : null,
            n: null
          },
    ...openFormula,
    sentences: [
      significant
        ? 'It differs from zero: something is still hiding somewhere.'
        : 'It does not differ from zero, so nothing needs to be looked for on its account.'
    ],
    inputs: [
      input('Found, all fractions', points(found.estimate), 'points', {
        note: found.ci ? intervalText(found.ci) : null
      }),
      input('Lost on the way to the instrument', points(downstream.estimate), 'points', {
        note: downstream.ci ? intervalText(downstream.ci) : null
      }),
      ...item.rows
        .filter((row) => row.stepRecovery.estimate !== null)
        .map((row) =>
          input(
            `Step recovery, ${(context.stages.find((stage) => stage.key === row.stage)?.name ?? row.stage).toLowerCase()}`,
            row.stepRecovery.estimate,
            '',
            {
              href: link({ kind: 'loss', variant: context.variant.code, stage: row.stage, entry: entry.id })
            }
          )
        )
    ]
  };
}

function experimentNumber(figures: StudyFigures, context: VariantContext, key: string): number | null {
  const id = context.stages.find((stage) => stage.key === key)?.evidence?.amounts.experiment.id;
  return figures.data.experiments.find((item) => item.id === id)?.number ?? null;
}

function halfText(ci: { readonly lower: number; readonly upper: number } | null): string | null {
  const half = ci && halfWidth({ ...ci, level: 0.95 });
  return half === null ? null : percentText(half);
}

/** A p-value as it is read: three digits, "< 0.0001" below that. */
function pText(p: number | null): string | null {
  if (p === null) return null;
  return p < 1e-4 ? '< 0.0001' : figureText(p);
}
