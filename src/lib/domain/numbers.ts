/** How a typed number was understood, or why it was not. */
export type NumberReading =
  { readonly ok: true; readonly value: number } | { readonly ok: false; readonly message: string };

const refuse = (message: string): NumberReading => ({ ok: false, message });

const plain = /^[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:e[+-]?\d+)?$/i;
/** Groups of three digits, parted by a space, an apostrophe or the other mark. */
const grouped = (separator: string, decimal: string): RegExp =>
  new RegExp(`^[+-]?[1-9]\\d{0,2}(?:${separator}\\d{3})+(?:${decimal}\\d+)?$`);

/**
 * Reads a number as people type it: decimal point or decimal comma, thousands parted by spaces, apostrophes or, where both marks
 * occur, by the first of them.
 *
 * "1,234" could be either 1.234 or 1234, so it is refused instead of guessed; "0,125" and "12,5" have one reading.
 */
export function readNumber(text: string): NumberReading {
  const typed = text
    .normalize('NFKC')
    .trim()
    .replace(/\u2212/g, '-');
  if (typed === '') return refuse('Enter a number.');
  const spaced = typed.replace(/(?<=\d)[\s'\u2019](?=\d{3}(?:\D|$))/g, '');
  if (plain.test(spaced)) return finite(Number(spaced), typed);

  if (/^[+-]?[1-9]\d{0,2},\d{3}$/.test(spaced)) {
    const digits = spaced.replace(',', '');
    return refuse(
      `'${typed}' can be read as ${spaced.replace(',', '.')} or as ${digits}. Write one of these.`
    );
  }
  if (grouped(',', '\\.').test(spaced)) return finite(Number(spaced.replaceAll(',', '')), typed);
  if (grouped('\\.', ',').test(spaced)) {
    return finite(Number(spaced.replaceAll('.', '').replace(',', '.')), typed);
  }
  const withPoint = spaced.replace(',', '.');
  if (plain.test(withPoint)) return finite(Number(withPoint), typed);
  return refuse(`'${typed}' is not a number.`);
}

function finite(value: number, typed: string): NumberReading {
  return Number.isFinite(value) ? { ok: true, value } : refuse(`'${typed}' is too large to be kept.`);
}
