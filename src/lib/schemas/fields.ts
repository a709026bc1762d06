import { z } from 'zod';
import { readNumber, type NumberReading } from '../domain/numbers';
import { readQuantity, type KeptUnit } from '../domain/quantities';

/** One line or paragraph that has to be there. */
export function requiredText(missing: string, most: number) {
  return z
    .string(missing)
    .transform((text) => text.replaceAll('\u0000', '').trim())
    .pipe(z.string().min(1, missing).max(most, `At most ${most} characters.`));
}

/** A text that may be left empty. */
export function optionalText(most: number) {
  return z
    .string()
    .optional()
    .transform((text) => (text ?? '').replaceAll('\u0000', '').trim())
    .pipe(z.string().max(most, `At most ${most} characters.`));
}

const blank = (value: unknown): boolean => value === undefined || value === null || value === '';

interface Bounds {
  /** The value has to be greater than this. */
  readonly above?: number;
  readonly least?: number;
  readonly most?: number;
}

function boundsProblem(value: number, { above, least, most }: Bounds): string | null {
  if (above !== undefined && value <= above) return `Must be greater than ${above}.`;
  if (least !== undefined && value < least) return `Must be ${least} or more.`;
  if (most !== undefined && value > most) return `Must be ${most} or less.`;
  return null;
}

/** A number or what was typed for one, through `read`; null where nothing was typed. */
function typed(read: (text: string) => NumberReading, bounds: Bounds) {
  return z
    .unknown()
    .optional()
    .transform((value, context): number | null => {
      if (blank(value) || (typeof value === 'string' && value.trim() === '')) return null;
      const reading: NumberReading =
        typeof value === 'number' && Number.isFinite(value)
          ? { ok: true, value }
          : typeof value === 'string'
            ? read(value)
            : { ok: false, message: 'Enter a number.' };
      const problem = reading.ok ? boundsProblem(reading.value, bounds) : reading.message;
      if (problem !== null) context.issues.push({ code: 'custom', message: problem, input: value });
      return reading.ok ? reading.value : null;
    });
}

const present =
  (missing: string) =>
  (value: number | null, context: z.RefinementCtx): number => {
    if (value === null) context.addIssue({ code: 'custom', message: missing });
    return value ?? Number.NaN;
  };

/** A quantity with or without its unit, converted to `unit`; null where nothing was typed. */
export function optionalQuantity(unit: KeptUnit, bounds: Bounds = { above: 0 }) {
  return typed((text) => readQuantity(text, unit), bounds);
}

/** A quantity that has to be there; see `optionalQuantity`. */
export function requiredQuantity(unit: KeptUnit, missing: string, bounds: Bounds = { above: 0 }) {
  return optionalQuantity(unit, bounds).transform(present(missing));
}

/** A bare number with a decimal point or comma; null where nothing was typed. */
export function optionalNumber(bounds: Bounds = {}) {
  return typed(readNumber, bounds);
}

export function requiredNumber(missing: string, bounds: Bounds = {}) {
  return optionalNumber(bounds).transform(present(missing));
}

/** A whole number within bounds. */
export function wholeNumber(missing: string, bounds: Bounds) {
  return requiredNumber(missing, bounds).refine(Number.isInteger, 'Must be a whole number.');
}

/** A calendar day, as a date field sends it; null where none was chosen. */
export const optionalDay = z
  .string()
  .optional()
  .transform((text) => (text ?? '').trim())
  .pipe(z.union([z.literal('').transform(() => null), z.iso.date('Enter a date as year-month-day.')]));

/** A moment with its zone, or none. */
export const optionalMoment = z
  .string()
  .optional()
  .transform((text) => (text ?? '').trim())
  .pipe(
    z.union([
      z.literal('').transform(() => null),
      z.iso.datetime({ offset: true, local: true, error: 'Enter a date and a time.' })
    ])
  );

/** An id chosen from a list; null for the empty choice. */
export const optionalId = z
  .string()
  .optional()
  .transform((text) => (text ?? '').trim())
  .pipe(z.union([z.literal('').transform(() => null), z.uuid('Choose one of the list.')]));

/** What a form sends for a list: nothing, one value, or several. */
export function listOf<Item extends z.ZodType>(item: Item) {
  return z.preprocess((value) => (blank(value) ? [] : Array.isArray(value) ? value : [value]), z.array(item));
}

/** The version of a thing that the person was looking at when they began to change it. */
export const seenVersion = wholeNumber('The version that was opened is missing. Reload the page.', {
  least: 1
});

export const reason = requiredText('Say why: it stays on record with your name.', 1000);
