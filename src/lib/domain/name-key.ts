const greek: Readonly<Record<string, string>> = {
  α: 'alpha',
  β: 'beta',
  γ: 'gamma',
  δ: 'delta',
  ε: 'epsilon',
  ζ: 'zeta',
  η: 'eta',
  θ: 'theta',
  κ: 'kappa',
  λ: 'lambda',
  μ: 'mu',
  ν: 'nu',
  ξ: 'xi',
  π: 'pi',
  ρ: 'rho',
  σ: 'sigma',
  ς: 'sigma',
  τ: 'tau',
  φ: 'phi',
  χ: 'chi',
  ψ: 'psi',
  ω: 'omega'
};

const dashes = /[\u002d\u00ad\u2010-\u2015\u2212\ufe58\ufe63\uff0d_]/gu;
const primes = /[\u2018\u2019\u02b9\u02bc\u2032\u00b4\u0060]/gu;

/**
 * The form under which two spellings of one name are the same: letter case, accents, Greek letters (α and alpha), brackets,
 * spaces, hyphens, dashes and underscores are folded.
 *
 * What tells substances or samples apart is kept: digits, commas, points, primes, colons, signs, and a separator
 * between two digits (sample S1-2 is not S12; 2,2'-dimethyl is not 2,2-dimethyl).
 *
 * @returns '' for a text without letters and digits worth comparing
 */
export function nameKey(text: string): string {
  return text
    .replace(primes, "'")
    .normalize('NFKD')
    .replace(primes, "'")
    .replace(/\p{M}+/gu, '')
    .toLowerCase()
    .replace(/[α-ω]/gu, (letter) => greek[letter] ?? letter)
    .replace(dashes, ' ')
    .replace(/[()[\]{}]/g, ' ')
    .trim()
    .replace(/\s+/g, ' ')
    .replace(/(?<!\d) | (?!\d)/g, '')
    .replaceAll(' ', '-');
}

/** A text that has the form of a CAS number, taken apart. */
function casParts(text: string): { readonly body: string; readonly check: string } | null {
  const match = /^(?:cas(?:\s*(?:no\.?|number|rn|#))?\s*[:#]?\s*)?(\d{2,7}-\d{2})-(\d)$/i.exec(
    text
      .normalize('NFKC')
      .replace(dashes, '-')
      .replace(/\s*-\s*/g, '-')
      .trim()
  );
  return match ? { body: match[1] ?? '', check: match[2] ?? '' } : null;
}

/**
 * The check digit of a CAS number: the other digits, numbered 1, 2, 3 … from the right, times their number, summed, modulo 10
 * (CAS Registry documentation, "Check digit verification").
 */
function casCheckDigit(body: string): string {
  const digits = [...body.replace('-', '')].reverse();
  return String(digits.reduce((total, digit, index) => total + Number(digit) * (index + 1), 0) % 10);
}

/** The CAS number in a text, in its canonical writing, or null where there is none. One whose check digit fails is none. */
export function parseCas(text: string): string | null {
  const parts = casParts(text);
  return parts && casCheckDigit(parts.body) === parts.check ? `${parts.body}-${parts.check}` : null;
}

/** Why a text is no CAS number, and what would be one. */
export function casProblem(text: string): string {
  const parts = casParts(text);
  return parts
    ? `'${text}' is not a CAS number: after ${parts.body} the check digit is ${casCheckDigit(parts.body)}, not ${parts.check}. Is a digit mistyped?`
    : `'${text}' is not a CAS number. One is two to seven digits, two digits and a check digit, such as 58-08-2.`;
}
