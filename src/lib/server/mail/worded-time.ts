const months = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December'
];

/** A moment as people write it, in UTC: "4 March 2026, 09:05 UTC". */
export function wordedTime(moment: Date): string {
  const two = (value: number): string => String(value).padStart(2, '0');
  const time = `${two(moment.getUTCHours())}:${two(moment.getUTCMinutes())} UTC`;
  return `${moment.getUTCDate()} ${months[moment.getUTCMonth()]} ${moment.getUTCFullYear()}, ${time}`;
}
