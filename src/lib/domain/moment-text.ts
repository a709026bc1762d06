const months = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];

/** An ISO 8601 moment in UTC, the same on the server and in every browser: "4 Mar 2026, 09:05 UTC". */
export function momentText(at: string, dateOnly = false): string {
  const moment = new Date(at);
  const two = (value: number): string => String(value).padStart(2, '0');
  const date = `${moment.getUTCDate()} ${months[moment.getUTCMonth()]} ${moment.getUTCFullYear()}`;
  return dateOnly ? date : `${date}, ${two(moment.getUTCHours())}:${two(moment.getUTCMinutes())} UTC`;
}

/** A day as fields and the database hold it (YYYY-MM-DD), or the day of a moment in UTC: "4 Mar 2026". */
export const dayText = (day: string): string => momentText(day, true);
