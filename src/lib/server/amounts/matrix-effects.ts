import { matrixEffect, StatsError } from '../stats';
import type { ReplicateKind } from '../../domain/vocabulary';
import type { ExperimentAmounts } from './experiment-amounts';
import { asZero } from './portions';
import { replicateExclusion, fractionExclusion } from './exclusions';
import { absoluteRefusal } from './practice';
import { spikeOf } from './spikes';
import type { Fraction, PanelEntry, Replicate } from './types';

export type MatrixFigures =
  | {
      readonly available: true;
      readonly entry: PanelEntry;
      readonly fraction: Fraction;
      readonly figures: ReturnType<typeof matrixEffect>;
      readonly counts: {
        readonly neat: number;
        readonly postSpiked: number;
        readonly preSpiked: number;
        readonly native: number;
      };
    }
  | { readonly available: false; readonly entry: PanelEntry; readonly reason: string };

/**
 * Matrix effect, recovery and process efficiency of one analyte, where the experiment has post-extraction spikes; null where it
 * has none. A: solvent standards, B: extracts spiked after the extraction, C: portions spiked before it, U: unspiked portions, all in
 * ng of the same fraction, at equal nominal amount and final volume. Matuszewski, Anal. Chem. 75 (2003) 3019, from memory.
 */
export function matrixFigures(amounts: ExperimentAmounts, entry: PanelEntry): MatrixFigures | null {
  const { experiment, panel } = amounts;
  const spikedAfter = experiment.replicates.filter(({ kind }) => kind === 'post-extraction spike');
  if (spikedAfter.length === 0 || entry.role === 'injection internal standard') return null;
  const no = (reason: string): MatrixFigures => ({ available: false, entry, reason });
  const relative = absoluteRefusal(experiment, entry, panel);
  if (relative) return no(relative);

  const fraction = experiment.fractions.find((candidate) =>
    spikedAfter.some(
      (replicate) => amounts.at(entry.id, replicate.id, candidate.id).amount.state !== 'missing'
    )
  );
  if (!fraction) return no(`No post-extraction spike holds ${entry.name} yet.`);

  const nominal = nominalAmounts(amounts, entry, ['solvent standard', 'post-extraction spike', 'spiked']);
  if (nominal.some((amount) => amount === null)) {
    return no(`${entry.name} is not spiked into standards, post-extraction spikes and portions alike.`);
  }
  if (nominal.some((amount) => !near(amount, nominal[0] ?? null))) {
    return no(
      `${entry.name} was spiked at different amounts (${nominal.map((ng) => `${ng} ng`).join(', ')}); a matrix effect needs one.`
    );
  }
  const of = (kind: ReplicateKind): Found[] => foundIn(amounts, entry, fraction, kind);
  const [neat, postSpiked, preSpiked, native] = [
    of('solvent standard'),
    of('post-extraction spike'),
    of('spiked'),
    of('unspiked')
  ];
  const volumes = [...neat, ...postSpiked, ...preSpiked, ...native]
    .map((item) => item.volume)
    .filter((volume) => volume !== null);
  if (volumes.some((volume) => !near(volume, volumes[0] ?? null))) {
    return no(
      `The final volumes of standards and extracts differ, so their responses of ${entry.name} cannot be compared.`
    );
  }
  if (neat.length === 0 || preSpiked.length === 0) {
    return no(
      `A matrix effect of ${entry.name} needs solvent standards and spiked portions beside the post-extraction spikes.`
    );
  }
  try {
    const figures = matrixEffect({
      neat: neat.map((item) => item.ng),
      postSpiked: postSpiked.map((item) => item.ng),
      preSpiked: preSpiked.map((item) => item.ng),
      ...(native.length > 0 ? { native: native.map((item) => item.ng) } : {})
    });
    const counts = {
      neat: neat.length,
      postSpiked: postSpiked.length,
      preSpiked: preSpiked.length,
      native: native.length
    };
    return { available: true, entry, fraction, figures, counts };
  } catch (error) {
    if (error instanceof StatsError) return no(error.message);
    throw error;
  }
}

interface Found {
  readonly ng: number;
  readonly volume: number | null;
}

function foundIn(
  amounts: ExperimentAmounts,
  entry: PanelEntry,
  fraction: Fraction,
  kind: ReplicateKind
): Found[] {
  const { experiment } = amounts;
  return experiment.replicates
    .filter((replicate) => replicate.kind === kind)
    .filter((replicate) => counts(amounts, entry, replicate, fraction))
    .flatMap((replicate) => {
      const own = kind === 'solvent standard' && amounts.hasPlace(replicate.id, null) ? null : fraction.id;
      const place = amounts.at(entry.id, replicate.id, own);
      const { amount } = place;
      if (amount.state !== 'amount' && amount.state !== 'not detected') return [];
      const first = place.used[0];
      const volume = first && 'trace' in first ? first.trace.finalVolumeMl : null;
      return [{ ng: asZero(amount.state === 'amount' ? amount.ng : { below: amount.belowNg }), volume }];
    });
}

function counts(
  amounts: ExperimentAmounts,
  entry: PanelEntry,
  replicate: Replicate,
  fraction: Fraction
): boolean {
  const { exclusions } = amounts.experiment;
  return (
    !replicateExclusion(exclusions, replicate.id, entry.id) &&
    !fractionExclusion(exclusions, replicate.id, fraction.id, entry.id)
  );
}

function nominalAmounts(
  amounts: ExperimentAmounts,
  entry: PanelEntry,
  kinds: readonly ReplicateKind[]
): (number | null)[] {
  return kinds.map((kind) => {
    const replicate = amounts.experiment.replicates.find((candidate) => candidate.kind === kind);
    return replicate ? spikeOf(amounts.experiment, replicate, entry.id) : null;
  });
}

function near(a: number | null, b: number | null): boolean {
  return a !== null && b !== null && Math.abs(a - b) <= 1e-6 * Math.max(Math.abs(a), Math.abs(b));
}
