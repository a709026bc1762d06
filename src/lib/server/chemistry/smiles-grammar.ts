/** One piece of a SMILES: what may follow it depends on its kind alone. */
type Kind = 'atom' | 'bond' | 'ring' | 'open' | 'close' | 'dot';

const atomOutside = /^(?:Br|Cl|[BCNOPSFI]|[bcnops])/;
/** Isotope, element or placeholder, chirality, hydrogens, charge, class. */
const atomInside =
  /^\[(?:\d{1,3})?(?:[A-Z][a-z]?|[a-z]{1,2}|\*)(?:@(?:@|TH[12]|AL[12]|SP[123]|TB\d{1,2}|OH\d{1,2})?)?(?:H\d?)?(?:[+-](?:\d{1,2}|[+-]{0,6}))?(?::\d{1,4})?\]/;
const pieces: readonly (readonly [Kind, RegExp])[] = [
  ['atom', atomOutside],
  ['atom', atomInside],
  ['atom', /^\*/],
  ['bond', /^[-=#:~/\\]/],
  ['ring', /^(?:\d|%\d\d|%\(\d{1,5}\))/],
  ['open', /^\(/],
  ['close', /^\)/],
  ['dot', /^\./]
];

/** What may come next; 'end' is the end of the text. */
const follows: Readonly<Record<Kind | 'start', readonly (Kind | 'end')[]>> = {
  start: ['atom'],
  atom: ['atom', 'bond', 'ring', 'open', 'close', 'dot', 'end'],
  bond: ['atom', 'ring'],
  ring: ['atom', 'bond', 'ring', 'open', 'close', 'dot', 'end'],
  open: ['atom', 'bond'],
  close: ['atom', 'bond', 'open', 'close', 'dot', 'end'],
  dot: ['atom']
};

/**
 * What breaks the grammar of a SMILES (after the OpenSMILES specification, from memory), or null. The library reads on where pieces
 * are missing, and gives another molecule.
 * @returns a clause that names the place, counted from 1
 */
export function brokenGrammar(smiles: string): string | null {
  let last: Kind | 'start' = 'start';
  let place = 0;
  let open = 0;
  while (place < smiles.length) {
    const found = pieceAt(smiles, place);
    const at = `at position ${place + 1}`;
    if (found === null) return unknownPiece(smiles, place, at);
    const [kind, text] = found;
    if (!follows[last].includes(kind))
      return `'${text}' ${at} cannot stand ${last === 'start' ? 'first' : 'there'}`;
    open += kind === 'open' ? 1 : kind === 'close' ? -1 : 0;
    if (open < 0) return `')' ${at} closes a branch that was never opened`;
    last = kind;
    place += text.length;
  }
  if (open > 0)
    return `${open === 1 ? 'a branch is' : `${open} branches are`} opened by '(' and never closed`;
  return follows[last].includes('end')
    ? null
    : `it ends after '${smiles.at(-1)}', where an atom should follow`;
}

function pieceAt(smiles: string, place: number): readonly [Kind, string] | null {
  // The longest piece is an atom in brackets.
  const rest = smiles.slice(place, place + 40);
  for (const [kind, pattern] of pieces) {
    const match = pattern.exec(rest);
    if (match) return [kind, match[0]];
  }
  return null;
}

function unknownPiece(smiles: string, place: number, at: string): string {
  const sign = String.fromCodePoint(smiles.codePointAt(place) ?? 0);
  if (sign === '%') return `two digits of a ring number must follow '%' ${at}`;
  if (sign === '[') return `the bracket ${at} does not hold an atom as SMILES writes it`;
  const isLetter = /\p{L}/u.test(sign);
  return isLetter
    ? `'${sign}' ${at} is no atom that may stand without brackets`
    : `'${sign}' ${at} is no sign of SMILES`;
}
