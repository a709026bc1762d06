import type { InjectionAmount } from './injection-amount';

/** What is known of one analyte in one fraction of one replicate, all its injections taken together; ng. */
export type Amount =
  | { readonly state: 'amount'; readonly ng: number }
  | { readonly state: 'not detected'; readonly belowNg: number }
  | { readonly state: 'missing'; readonly reason: string }
  | { readonly state: 'above range'; readonly reason: string }
  | { readonly state: 'refused'; readonly reason: string };

export interface PlaceAmount {
  readonly amount: Amount;
  /** The injections the amount was formed from. */
  readonly used: readonly InjectionAmount[];
  /** Injections that were not needed, or could not be used. */
  readonly unused: readonly InjectionAmount[];
  /** Sentences about anything out of the ordinary. */
  readonly notes: readonly string[];
}

export const nothingMeasured: PlaceAmount = {
  amount: { state: 'missing', reason: 'nothing was measured' },
  used: [],
  unused: [],
  notes: []
};

/**
 * Joins the injections of one place. Repeated injections at one dilution are averaged. A result above range is replaced by
 * an injection diluted further, and makes the place unusable while there is none. Of several dilutions in range the least
 * diluted counts. What is above range at first and not detected diluted contradicts itself and gives no amount. Where some repeats found the analyte and others did not, the place counts as not detected below the
 * largest of their figures, which both ends of the truth lie within.
 */
export function placeAmount(injections: readonly InjectionAmount[]): PlaceAmount {
  const [only] = injections;
  if (!only) return nothingMeasured;
  if (injections.length === 1 && isUsable(only)) {
    return {
      amount: amountOfOne(only),
      used: injections,
      unused: [],
      notes: only.trace.extrapolated ? extrapolatedNote : []
    };
  }
  const above = injections.filter((item) => item.state === 'above range');
  const replacedUpTo = Math.max(0, ...above.map(dilutionOf));
  const usable = injections.filter(isUsable).filter((item) => dilutionOf(item) > replacedUpTo);
  if (usable.length === 0)
    return { amount: whyUnusable(injections, above), used: [], unused: injections, notes: [] };

  const dilution = Math.min(...usable.map(dilutionOf));
  const used = usable.filter((item) => dilutionOf(item) === dilution);
  if (above.length > 0 && used.every((item) => item.state === 'not detected')) {
    const reason = `above range at first, yet not detected in the injection diluted ${dilution}-fold: the two contradict each other`;
    return { amount: { state: 'refused', reason }, used: [], unused: injections, notes: [] };
  }
  const unused = injections.filter((item) => !(used as readonly InjectionAmount[]).includes(item));
  return { ...joined(used), used, unused, notes: notesOn(used, unused, dilution) };
}

const extrapolatedNote = ['read below the lowest calibration level'];

function amountOfOne(item: Usable): Amount {
  return item.state === 'amount'
    ? { state: 'amount', ng: item.ng }
    : { state: 'not detected', belowNg: Math.max(0, item.belowNg) };
}

type Usable = Extract<InjectionAmount, { state: 'amount' | 'not detected' }>;

function isUsable(item: InjectionAmount): item is Usable {
  return item.state === 'amount' || item.state === 'not detected';
}

function dilutionOf(item: InjectionAmount): number {
  return 'trace' in item ? item.trace.reported.dilution : item.reported.dilution;
}

function whyUnusable(injections: readonly InjectionAmount[], above: readonly InjectionAmount[]): Amount {
  const first = above[0];
  if (first?.state === 'above range') return { state: 'above range', reason: first.reason };
  const refused = injections.find((item) => item.state === 'refused');
  if (refused?.state === 'refused') return { state: 'refused', reason: refused.reason };
  return { state: 'missing', reason: 'the cell was left empty' };
}

function joined(used: readonly Usable[]): { amount: Amount } {
  const found = used.filter((item) => item.state === 'amount').map((item) => item.ng);
  if (found.length === used.length) {
    return { amount: { state: 'amount', ng: found.reduce((sum, ng) => sum + ng, 0) / found.length } };
  }
  const limits = used.map((item) => (item.state === 'amount' ? item.ng : item.belowNg));
  return { amount: { state: 'not detected', belowNg: Math.max(0, ...limits) } };
}

function notesOn(used: readonly Usable[], unused: readonly InjectionAmount[], dilution: number): string[] {
  const notes: string[] = [];
  if (used.length > 1) notes.push(`mean of ${used.length} injections`);
  const found = used.filter((item) => item.state === 'amount').length;
  if (found > 0 && found < used.length) {
    notes.push(
      `found in ${found} of ${used.length} injections, so counted as not detected below the largest of them`
    );
  }
  if (unused.some((item) => item.state === 'above range')) {
    notes.push(`replaced by the injection diluted ${dilution}-fold, the undiluted one being above range`);
  }
  for (const item of unused)
    if (item.state === 'refused') notes.push(`one injection could not be used: ${item.reason}`);
  if (unused.some((item) => item.state === 'missing')) notes.push('one injection was left empty');
  if (used.some((item) => item.trace.extrapolated)) notes.push(...extrapolatedNote);
  return notes;
}
