import type { DateOrder } from '../../schemas/column-map';
import { isoToSerial, serialToIso } from './sheet';

const months = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec'] as const;

interface DateParts {
  /** As they stand, from left to right. */
  readonly numbers: readonly [number, number, number];
  /** The month was a word. */
  readonly order: DateOrder | null;
  readonly time: string;
}

function partsOf(text: string): DateParts | null {
  const match =
    /^(\d{1,4})([-./ ])(\d{1,2}|[a-z]{3,9})\2(\d{1,4})(?:[,T ]\s*(\d{1,2}):(\d{2})(?::(\d{2})(?:\.\d+)?)?\s*([ap])?\.?m?\.?)?Z?$/i.exec(
      text.trim()
    );
  if (!match) return null;
  const [, first = '', , middle = '', last = '', hour, minute, second = '0', half] = match;
  const word = months.indexOf(middle.slice(0, 3).toLowerCase() as (typeof months)[number]) + 1;
  if (!/^\d/.test(middle) && word === 0) return null;
  const isYearFirst = first.length === 4;
  if (!isYearFirst && last.length !== 4) return null;
  if (isYearFirst && last.length > 2) return null;
  const hours =
    hour === undefined
      ? 0
      : half
        ? (Number(hour) % 12) + (half.toLowerCase() === 'p' ? 12 : 0)
        : Number(hour);
  const pad = (number: number | string): string => String(number).padStart(2, '0');
  return {
    numbers: [Number(first), word || Number(middle), Number(last)],
    order: isYearFirst ? 'year-month-day' : word > 0 ? 'day-month-year' : null,
    time: `${pad(hours)}:${pad(minute ?? 0)}:${pad(second)}`
  };
}

/**
 * A date as text, with or without a time: year first, with the month as a word, or in the order given.
 *
 * @param order of days and months where the year stands last; null: not known, and such a date is not read
 * @returns ISO 8601 without a zone, without the time where it is midnight; null for what is no date, or could be two
 */
export function textDate(text: string, order: DateOrder | null): string | null {
  const parts = partsOf(text);
  const by = parts?.order ?? order;
  if (!parts || by === null || (by === 'year-month-day') !== (parts.order === 'year-month-day')) return null;
  const [first, middle, last] = parts.numbers;
  const [year, month, day] =
    by === 'year-month-day'
      ? [first, middle, last]
      : by === 'day-month-year'
        ? [last, middle, first]
        : [last, first, middle];
  const pad = (number: number, digits: number): string => String(number).padStart(digits, '0');
  const iso = `${pad(year, 4)}-${pad(month, 2)}-${pad(day, 2)}T${parts.time}`;
  const serial = isoToSerial(iso);
  // 31 April would come back as 1 May.
  return serial !== null && serialToIso(serial).startsWith(iso.slice(0, 10)) ? serialToIso(serial) : null;
}

/** What the dates of a column prove about their order: a number above twelve is a day. null: nothing, or both. */
export function dateOrderOf(texts: Iterable<string>): DateOrder | null {
  let dayFirst = false;
  let monthFirst = false;
  for (const text of texts) {
    const parts = partsOf(text);
    if (!parts || parts.order !== null) continue;
    const [first, middle] = parts.numbers;
    if (first > 12 && middle <= 12) dayFirst = true;
    if (middle > 12 && first <= 12) monthFirst = true;
  }
  if (dayFirst === monthFirst) return null;
  return dayFirst ? 'day-month-year' : 'month-day-year';
}
