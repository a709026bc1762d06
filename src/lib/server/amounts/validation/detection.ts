import { methodDetectionLimit } from '../../stats';
import {
  commonSpike,
  commonVolume,
  coverageOf,
  isCounted,
  type Coverage,
  type Preparation
} from './preparations';

/** What the procedure asks for. 40 CFR 136 Appendix B, revision 2. */
export const detectionAsks = { preparations: 7, batches: 3, days: 3, spikeLow: 2, spikeHigh: 10 } as const;

/** One thing the procedure asks for, and what there is. */
export interface Condition {
  readonly what: string;
  /** "7 of 7", "2 of 3" */
  readonly found: string;
  readonly holds: boolean;
}

/** The method detection limit of one analyte, in the unit stated. */
export interface Detection {
  readonly spiked: readonly Preparation[];
  readonly blanks: readonly Preparation[];
  readonly countedSpiked: readonly Preparation[];
  readonly countedBlanks: readonly Preparation[];
  readonly spikedCoverage: Coverage;
  readonly blankCoverage: Coverage;
  /** ng/L where every preparation has a sample volume. */
  readonly unit: 'ng/L' | 'ng';
  /** ng for one of the unit; null where preparations differ in volume. */
  readonly ngPerUnit: number | null;
  /** In the unit; null where preparations received different amounts. */
  readonly spike: number | null;
  readonly fromSpiked: number | null;
  readonly fromBlanks: number | null;
  /** Blanks that gave a number. */
  readonly numericBlanks: number;
  /** null: the procedure is not complete; see `refusal`. */
  readonly mdl: number | null;
  readonly rule: string;
  readonly refusal: string | null;
  /** True where more preparations are wanted, false where what there is speaks against the limit. */
  readonly tooFew: boolean;
  readonly conditions: readonly Condition[];
}

/**
 * Method detection limit of one analyte from preparations spiked at a low level and method blanks, as found (nothing subtracted):
 * MDLs = t(n - 1, 0.99) s of the spiked, MDLb from the blanks, the larger of the two. Without seven of each there is no MDL; what
 * the spiked ones give stands by itself then. Only what a person set aside is left out.
 */
export function detection(
  spikedGiven: readonly Preparation[],
  blanksGiven: readonly Preparation[]
): Detection {
  const spiked = spikedGiven.filter(({ portion }) => portion.spikeNg !== null);
  const countedSpiked = spiked.filter(isCounted);
  const countedBlanks = blanksGiven.filter(isCounted);
  const all = [...countedSpiked, ...countedBlanks];
  const sized = all.length > 0 && all.every(({ portion }) => portion.replicate.sampleVolumeMl !== null);
  const inUnit = (ng: number, { portion }: Preparation): number =>
    sized ? (1000 * ng) / (portion.replicate.sampleVolumeMl ?? 1) : ng;
  const volume = commonVolume(all);
  const spikeNg = commonSpike(countedSpiked);
  const spikes = countedSpiked.map((item) => inUnit(item.portion.spikeNg ?? 0, item));
  const oneLevel = spikes.every((value) => Math.abs(value - (spikes[0] ?? 0)) <= 1e-9 * value);
  const spike = spikeNg !== null && oneLevel ? (spikes[0] ?? null) : null;

  const blanks = countedBlanks.map((item) =>
    item.found.state === 'amount' ? inUnit(item.found.ng, item) : null
  );
  const values = countedSpiked.map((item) =>
    item.found.state === 'amount' ? inUnit(item.found.ng, item) : 0
  );
  const notAbove = countedSpiked.filter((_, index) => !((values[index] ?? 0) > 0));
  const enough = (items: readonly Preparation[]): boolean => items.length >= detectionAsks.preparations;
  const possible = enough(countedSpiked) && notAbove.length === 0 && spike !== null;
  const found = possible
    ? methodDetectionLimit({ spiked: values, ...(enough(countedBlanks) ? { blanks } : {}) })
    : null;
  const complete = found !== null && enough(countedBlanks);
  const mdl = complete ? found.mdl : null;
  const base = {
    spiked,
    blanks: blanksGiven,
    countedSpiked,
    countedBlanks,
    spikedCoverage: coverageOf(countedSpiked),
    blankCoverage: coverageOf(countedBlanks),
    unit: sized ? ('ng/L' as const) : ('ng' as const),
    ngPerUnit: sized ? (volume === null ? null : volume / 1000) : 1,
    spike,
    fromSpiked: found?.fromSpiked ?? null,
    fromBlanks: complete ? found.fromBlanks : null,
    numericBlanks: blanks.filter((value) => value !== null).length,
    mdl,
    rule: found?.rule ?? ''
  };
  return { ...base, ...refusalOf(base, notAbove), conditions: conditionsOf(base, notAbove) };
}

type Base = Omit<Detection, 'refusal' | 'tooFew' | 'conditions'>;

function refusalOf(base: Base, notAbove: readonly Preparation[]): Pick<Detection, 'refusal' | 'tooFew'> {
  const { countedSpiked, countedBlanks, spike, mdl } = base;
  if (mdl !== null) return { refusal: null, tooFew: false };
  if (notAbove.length > 0) {
    const labels = notAbove.map(({ portion }) => portion.replicate.label).join(', ');
    return { refusal: `nothing above zero in ${labels}: the spike has to be higher`, tooFew: false };
  }
  if (countedSpiked.length > 0 && spike === null) {
    return {
      refusal: 'the preparations were spiked at different levels: a limit comes from one',
      tooFew: false
    };
  }
  const asked = detectionAsks.preparations;
  const lacks = [
    ...(countedSpiked.length < asked ? [`${countedSpiked.length} of ${asked} spiked preparations`] : []),
    ...(countedBlanks.length < asked ? [`${countedBlanks.length} of ${asked} method blanks`] : [])
  ];
  return { refusal: lacks.join(', '), tooFew: true };
}

function conditionsOf(base: Base, notAbove: readonly Preparation[]): Condition[] {
  const { preparations, batches, days, spikeLow, spikeHigh } = detectionAsks;
  const counted = (what: string, found: number, asked: number): Condition => ({
    what,
    found: `${found} of ${asked}`,
    holds: found >= asked
  });
  const { spikedCoverage: spiked, blankCoverage: blanks, mdl, spike, countedSpiked } = base;
  const ratio = mdl !== null && mdl > 0 && spike !== null ? spike / mdl : null;
  return [
    counted('spiked preparations', spiked.n, preparations),
    counted('batches with spiked preparations', spiked.batches.length, batches),
    counted('dates of spiked preparations', spiked.days.length, days),
    counted('method blanks', blanks.n, preparations),
    counted('batches with method blanks', blanks.batches.length, batches),
    counted('dates of method blanks', blanks.days.length, days),
    {
      what: 'spiked results above zero',
      found: `${countedSpiked.length - notAbove.length} of ${countedSpiked.length}`,
      holds: countedSpiked.length > 0 && notAbove.length === 0
    },
    ...(ratio === null
      ? []
      : [
          {
            what: `spike ${spikeLow} to ${spikeHigh} times the limit`,
            found: `${Number(ratio.toPrecision(3))} times`,
            holds: ratio >= spikeLow && ratio <= spikeHigh
          }
        ])
  ];
}
