import { fractionNeutral } from './charge';
import { knownCharge, type PanelAnalyte } from './panel-analyte';
import { checkedRange, phWindows, type PhRange, type PhWindow } from './ph-windows';
import { share as checkedShare } from './guards';
import { shareText } from './text';

/** One pass: a pH, the stretch around it that serves as many, and the analytes that are neutral there. */
export interface Pass {
  readonly ph: number;
  /** pH values of the scan next to each other that keep the same number neutral. */
  readonly serves: PhRange;
  readonly neutral: readonly string[];
}

export interface PassReading {
  readonly share: number;
  readonly range: PhRange;
  /** Distance of the pH values that were tried. */
  readonly step: number;
  /** Analytes whose charge is known; the others are in `unknown`. */
  readonly judged: number;
  readonly one: Pass | null;
  /** The two passes that together hold more than one does; null when a second gains none. */
  readonly two: { readonly first: Pass; readonly second: Pass; readonly neutral: readonly string[] } | null;
  /** Neutral at no pH that was tried. */
  readonly never: readonly string[];
  readonly unknown: readonly string[];
  /** The reading in sentences. */
  readonly sentences: readonly string[];
}

const step = 0.1;

/**
 * How many of a panel one pass, or two, can have neutral: the working range is scanned in steps of 0.1 and at each pH those count
 * of which at least `share` is neutral.
 *
 * Among pH values that keep as many neutral the one farthest from the nearest edge of a window is taken (a unit is far enough), then the
 * one nearest to 7. Neutral is
 * not held: what is hydrophilic or too much for the bed passes all the same.
 * @param range pH that the sorbent and the analytes stand, such as `workingRanges.c18`
 * @returns names of analytes in the order given
 * @throws ChemistryError for a share outside 0 to 1 or a range that is not in order
 */
export function readPasses(analytes: readonly PanelAnalyte[], range: PhRange, share = 0.99): PassReading {
  const { low, high } = checkedRange(range);
  checkedShare(share, 'The share');
  const charges = analytes.map((analyte) => ({ name: analyte.name, charge: knownCharge(analyte) }));
  const judged = charges.flatMap(({ name, charge }) =>
    charge.known
      ? [{ name, window: phWindows(charge.groups, 'neutral', share, { low, high })[0] ?? null }]
      : []
  );
  const windows = judged.map(({ window }) => window);
  const tried = scanned(low, high);
  const best = bestPass(tried, windows);
  const names = (held: readonly boolean[]) => judged.flatMap(({ name }, i) => (held[i] ? [name] : []));
  const pass = (ph: number): Pass => ({
    ph,
    serves: servedBy(ph, tried, windows),
    neutral: names(heldAt(ph, windows))
  });
  const one = judged.length === 0 || best.count === 0 ? null : pass(best.ph);
  const pair = one === null ? null : bestPair(tried, windows, best.count);
  const two = pair && {
    first: pass(pair.first),
    second: pass(pair.second),
    neutral: names(heldByEither(pair.first, pair.second, windows))
  };
  const ever = windows.map((window) => tried.some((ph) => holds(window, ph)));
  const reading = {
    share,
    range: { low, high },
    step,
    judged: judged.length,
    one,
    two,
    never: names(ever.map((is) => !is)),
    unknown: charges.flatMap(({ name, charge }) => (charge.known ? [] : [name]))
  };
  return { ...reading, sentences: sentencesOf(reading) };
}

/** The share of one analyte that is neutral, for a table beside the reading; null where its charge is not known. */
export function neutralShareOf(analyte: PanelAnalyte, ph: number): number | null {
  const charge = knownCharge(analyte);
  return charge.known ? fractionNeutral(charge.groups, ph) : null;
}

type Windows = readonly (PhWindow | null)[];

/** The pH values of the scan: multiples of the step, and the ends. */
function scanned(low: number, high: number): readonly number[] {
  const first = Math.ceil(low / step - 1e-9);
  const last = Math.floor(high / step + 1e-9);
  const inside = Array.from({ length: Math.max(0, last - first + 1) }, (_, i) =>
    Number(((first + i) * step).toFixed(1))
  );
  return [...new Set([low, ...inside.filter((ph) => ph > low && ph < high), high])];
}

const holds = (window: PhWindow | null, ph: number): boolean =>
  window !== null && ph >= window.low && ph <= window.high;
const heldAt = (ph: number, windows: Windows): readonly boolean[] =>
  windows.map((window) => holds(window, ph));
const heldByEither = (a: number, b: number, windows: Windows): readonly boolean[] =>
  windows.map((window) => holds(window, a) || holds(window, b));

/** How far a pH is from the nearest edge of a window that it lies in; ends of the range are no edges. */
function room(window: PhWindow, ph: number): number {
  return Math.min(
    window.lowIsEdge ? ph - window.low : Infinity,
    window.highIsEdge ? window.high - ph : Infinity
  );
}

/** Larger is better, first difference decides. */
function isBetter(a: readonly number[], b: readonly number[]): boolean {
  const index = a.findIndex((value, i) => value !== b[i]);
  return index >= 0 && a[index]! > b[index]!;
}

function bestPass(
  tried: readonly number[],
  windows: Windows
): { readonly ph: number; readonly count: number } {
  let best: { ph: number; rank: readonly number[] } | null = null;
  for (const ph of tried) {
    const rank = rankOf([ph], windows);
    if (best === null || isBetter(rank, best.rank)) best = { ph, rank };
  }
  return { ph: best!.ph, count: best!.rank[0]! };
}

/** Room beyond which more of it gains nothing: a unit takes 99 % to 99.9 %. */
const enoughRoom = 1;

/** Number held, the least room that any of them has, the room of all, and nearness to pH 7, so that nothing is adjusted without need. */
function rankOf(phs: readonly number[], windows: Windows): readonly number[] {
  let count = 0;
  let least = enoughRoom;
  let all = 0;
  for (const window of windows) {
    let most = -1;
    for (const ph of phs) if (window !== null && holds(window, ph)) most = Math.max(most, room(window, ph));
    if (most < 0) continue;
    count += 1;
    least = Math.min(least, most);
    all += Math.min(enoughRoom, most);
  }
  // To a millionth of a unit, so that rounding does not decide between two pH values that are as good.
  const rounded = (value: number) => Math.round(value * 1e6);
  return [count, rounded(least), rounded(all), -phs.reduce((sum, ph) => sum + Math.abs(ph - 7), 0)];
}

function bestPair(tried: readonly number[], windows: Windows, oneHolds: number) {
  let best: { first: number; second: number; rank: readonly number[] } | null = null;
  for (const [i, first] of tried.entries()) {
    for (const second of tried.slice(i + 1)) {
      let count = 0;
      for (const window of windows) if (holds(window, first) || holds(window, second)) count += 1;
      // Ranking costs more than counting, and most pairs hold fewer.
      if (count <= oneHolds || count < (best?.rank[0] ?? 0)) continue;
      const rank = rankOf([first, second], windows);
      if (best === null || isBetter(rank, best.rank)) best = { first, second, rank };
    }
  }
  return best;
}

function servedBy(ph: number, tried: readonly number[], windows: Windows): PhRange {
  const count = (at: number) => heldAt(at, windows).filter(Boolean).length;
  const target = count(ph);
  let [first, last] = [tried.indexOf(ph), tried.indexOf(ph)];
  while (first > 0 && count(tried[first - 1]!) === target) first -= 1;
  while (last < tried.length - 1 && count(tried[last + 1]!) === target) last += 1;
  return { low: tried[first]!, high: tried[last]! };
}

function sentencesOf(reading: Omit<PassReading, 'sentences'>): readonly string[] {
  const { judged, one, two, never, unknown, range } = reading;
  const percent = shareText(reading.share);
  const sentences: string[] = [];
  if (judged === 0) sentences.push('Of no analyte of this panel is the charge known.');
  else if (one === null) {
    sentences.push(
      `At no pH from ${range.low} to ${range.high} is any of the ${judged} at least ${percent} neutral.`
    );
  } else {
    sentences.push(
      `One pass at pH ${one.ph} has ${one.neutral.length} of ${judged} at least ${percent} neutral.`
    );
    if (two) {
      sentences.push(
        `Two passes, at pH ${two.first.ph} and ${two.second.ph}, have ${two.neutral.length}. Would the second be worth it?`
      );
    } else if (one.neutral.length < judged) {
      sentences.push('A second pass at another pH gains none.');
    }
  }
  if (never.length > 0 && one !== null) {
    const whose = never.length === 1 ? 'it' : 'them';
    sentences.push(
      `${never.length} ${never.length === 1 ? 'reaches' : 'reach'} that at no pH from ${range.low} to ${range.high}. Would an ion exchanger hold ${whose}, or a sorbent that stands more?`
    );
  }
  if (unknown.length > 0) {
    sentences.push(`Of ${unknown.length} the charge is not known; they are not counted.`);
  }
  return sentences;
}
