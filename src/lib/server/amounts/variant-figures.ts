import type { Medium, StageKind } from '../../domain/stages';
import { benjaminiHochberg, stageLosses, type Estimate, type Sample } from '../stats';
import type { ExperimentAmounts } from './experiment-amounts';
import { matrixFigures } from './matrix-effects';
import type { End } from './method-figures';
import { methodSample } from './method-sample';
import { openPart, type OpenPart } from './open-part';
import { recoveryInput, type RecoveryInput } from './recovery-input';
import type { PanelEntry } from './types';

/** A stage of a variant with the experiment that stands for it, from the mouth up. */
export interface StageOfVariant {
  readonly key: string;
  readonly name: string;
  readonly kind: StageKind;
  readonly evidence: { readonly amounts: ExperimentAmounts; readonly medium: Medium } | null;
}

type StageLoss = ReturnType<typeof stageLosses>[number];

export interface StageRow extends StageLoss {
  /** Portions the figure rests on. */
  readonly n: number;
  /** Stages below it without a figure of this analyte: what they take is part of this row. */
  readonly covers: readonly string[];
  /** p, Holm over the stages and Benjamini-Hochberg over the panel. */
  readonly pPanel: number | null;
  /** The loss may be named: pPanel < 0.05 and the lower bound of `lost` above 5 points, whatever not-detected stands for. */
  readonly named: boolean;
  /** The matrix effect (percent, 100 = none) the recoveries were divided by; null: none. */
  readonly matrixEffect: number | null;
}

export interface EntryInVariant {
  readonly entry: PanelEntry;
  /** From the mouth up; empty when refused. */
  readonly rows: readonly StageRow[];
  readonly refusal: string | null;
  /** Stages without a figure of this analyte, with the reason. */
  readonly gaps: readonly { readonly key: string; readonly reason: string }[];
  readonly open: OpenPart;
}

export interface VariantFigures {
  readonly stages: readonly StageOfVariant[];
  readonly entries: ReadonlyMap<string, EntryInVariant>;
  /** The stages' experiments were made in different media. */
  readonly mediaDiffer: boolean;
}

/** A loss is named from here on. The points are a convention of this program. */
const naming = { p: 0.05, points: 5 };

/**
 * What each stage of a variant takes of each analyte, what is lost on the way and what is open. A loss is *named* only when its p,
 * Holm over stages and Benjamini-Hochberg over the panel, is below 0.05 and the lower bound of `lost` passes 5 points, both with
 * not-detected as zero and at its limit.
 */
export function variantFigures(
  stages: readonly StageOfVariant[],
  entries: readonly PanelEntry[],
  level = 0.95
): VariantFigures {
  const media = new Set(stages.flatMap((stage) => (stage.evidence ? [stage.evidence.medium] : [])));
  const mediaDiffer = media.size > 1;
  const taken = entries.map((entry) => takeStages(stages, entry, mediaDiffer));
  const atEnds = (['zero', 'high', 'low'] as const).map((end) => lossesOf(taken, end, level));
  const [atZero] = atEnds;

  const result = new Map<string, EntryInVariant>();
  taken.forEach((item, index) => {
    const losses = atZero?.[index] ?? [];
    const rows = losses.map((row, position): StageRow => {
      const stage = item.samples[position]!;
      return {
        ...row.loss,
        pPanel: row.pPanel,
        n: stage.sample.values.length,
        covers: stage.covers,
        matrixEffect: stage.sample.matrixEffect?.estimate ?? null,
        named: atEnds.every((end) => end[index]?.[position]?.named ?? false)
      };
    });
    result.set(item.entry.id, {
      entry: item.entry,
      rows,
      refusal: item.refusal,
      gaps: item.gaps,
      open: openOf(item, rows, stages)
    });
  });
  return { stages, entries: result, mediaDiffer };
}

interface TakenStage {
  readonly key: string;
  readonly kind: StageKind;
  readonly input: RecoveryInput;
  readonly sample: Sample;
  readonly covers: readonly string[];
}

interface Taken {
  readonly entry: PanelEntry;
  readonly samples: readonly TakenStage[];
  readonly gaps: EntryInVariant['gaps'];
  readonly refusal: string | null;
}

function takeStages(stages: readonly StageOfVariant[], entry: PanelEntry, mediaDiffer: boolean): Taken {
  const samples: TakenStage[] = [];
  const gaps: { key: string; reason: string }[] = [];
  let covers: string[] = [];
  for (const stage of stages) {
    const missing = (reason: string): void => {
      gaps.push({ key: stage.key, reason });
      if (stage.kind === 'loss') covers.push(stage.key);
    };
    if (!stage.evidence) {
      missing(`Nothing has been spiked at ${stage.name.toLowerCase()} yet.`);
      continue;
    }
    const input = recoveryInput(stage.evidence.amounts, entry);
    if (!input.ready) {
      if (input.kind === 'relative only') return { entry, samples: [], gaps, refusal: input.reason };
      missing(input.reason);
      continue;
    }
    const sample = methodSample(input);
    if (!sample) {
      missing(
        `No portion of experiment ${stage.evidence.amounts.experiment.number} is complete for ${entry.name}.`
      );
      continue;
    }
    const effect = mediaDiffer ? effectOf(stage.evidence.amounts, input) : null;
    samples.push({
      key: stage.key,
      kind: stage.kind,
      input,
      sample: effect ? { ...sample, matrixEffect: effect } : sample,
      covers
    });
    covers = [];
  }
  return { entry, samples, gaps, refusal: null };
}

/** The matrix effect that brings a recovery to the scale of solvent standards, where it was measured in the method's only fraction. */
function effectOf(
  amounts: ExperimentAmounts,
  input: RecoveryInput
): NonNullable<Sample['matrixEffect']> | null {
  const method = input.fractions.filter((fraction) => fraction.countsAs === 'method');
  const measured = matrixFigures(amounts, input.entry);
  if (!measured?.available || method.length !== 1 || method[0]?.id !== measured.fraction.id) return null;
  const { estimate, se, df } = measured.figures.matrixEffect;
  if (estimate === null || se === null || df === null || estimate <= 0) return null;
  return { key: `${amounts.experiment.id}/${input.entry.id}`, estimate, se, df };
}

interface JudgedLoss {
  readonly loss: StageLoss;
  readonly pPanel: number | null;
  readonly named: boolean;
}

function lossesOf(taken: readonly Taken[], end: End, level: number): JudgedLoss[][] {
  const rows = taken.map((item) =>
    item.samples.length === 0
      ? []
      : stageLosses(
          item.samples.map((stage) => ({
            ...(end === 'zero' ? stage.sample : { ...stage.sample, ...methodSample(stage.input, end) }),
            stage: stage.key,
            kind: stage.kind
          })),
          level
        )
  );
  const keys = [...new Set(taken.flatMap((item) => item.samples.map((stage) => stage.key)))];
  const panel = new Map(
    keys.map((key) => {
      const ofStage = rows.map((losses) => losses.find((loss) => loss.stage === key)?.pAdjusted ?? null);
      return [key, benjaminiHochberg(ofStage)] as const;
    })
  );
  return rows.map((losses, index) =>
    losses.map((loss) => {
      const pPanel = panel.get(loss.stage)?.[index] ?? null;
      const lower = loss.lost?.ci?.lower ?? null;
      return {
        loss,
        pPanel,
        named: pPanel !== null && pPanel < naming.p && lower !== null && lower > naming.points
      };
    })
  );
}

function openOf(item: Taken, rows: readonly StageRow[], stages: readonly StageOfVariant[]): OpenPart {
  if (item.refusal) return { available: false, reason: item.refusal };
  const top = item.samples.at(-1);
  const farthest = stages.at(-1);
  if (!top || !farthest || top.key !== farthest.key) {
    const reason =
      item.gaps.find((gap) => gap.key === farthest?.key)?.reason ?? 'No stage has been measured yet.';
    return { available: false, reason };
  }
  const steps: Record<string, Estimate> = {};
  for (const row of rows) if (row.covers.length === 0) steps[row.stage] = row.stepRecovery;
  const signal = rows.find((row) =>
    item.samples.some((stage) => stage.key === row.stage && stage.kind === 'signal')
  );
  const name = (key: string): string => stages.find((stage) => stage.key === key)?.name ?? key;
  const masked = top.sample.matrixEffect;
  const only = top.input.fractions.find((fraction) => fraction.countsAs === 'method');
  const effect = masked && only ? { ...masked, fractionId: only.id } : null;
  return openPart(top.input, steps, signal?.recovered ?? null, name, effect);
}
