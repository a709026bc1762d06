/** A value of a property with where it was taken from. */
export interface Sourced<Value = number> {
  readonly value: Value;
  readonly source: string;
}

/** A substance as the library of a new lab begins with it. Properties nobody has seen a value of are left out. */
export interface LibraryAnalyte {
  readonly name: string;
  readonly synonyms: readonly string[];
  readonly cas: string | null;
  readonly smiles: string | null;
  readonly formula: string | null;
  /** g/mol, from the structure. */
  readonly molarMass: number | null;
  readonly class: string;
  readonly logKow?: Sourced;
  readonly pkaAcid?: Sourced<readonly number[]>;
  /** pKa values of the conjugate acids. */
  readonly pkaBase?: Sourced<readonly number[]>;
  readonly boilingPointC?: Sourced;
  readonly vapourPressurePa?: Sourced;
  readonly henryPaM3Mol?: Sourced;
  readonly waterSolubilityMgL?: Sourced;
  readonly note?: string;
}

/** Pascals in a millimetre of mercury. */
const pascalsPerMmHg = 133.322368;
/** Pascals in a standard atmosphere, exact by definition. */
const pascalsPerAtmosphere = 101325;

const fromMemory = (detail: string) => `from memory, verify${detail === '' ? '' : ` (${detail})`}`;
/** Seven figures are more than any source has, and hide the noise of the conversion. */
const rounded = (value: number) => Number(value.toPrecision(7));

export const memory = (value: number, detail: string): Sourced => ({ value, source: fromMemory(detail) });

/** Working pKa values; `range` what is quoted elsewhere, `seen` what a collection of published values has. */
export const pka = (value: readonly number[], range: string, seen?: string): Sourced<readonly number[]> => ({
  value,
  source: fromMemory(range) + (seen === undefined ? '' : `; a collection of published pKa values has ${seen}`)
});

export const kowwin = (value: number, reference: string): Sourced => ({
  value,
  source: `${reference}, in the experimental set of EPA/SRC KOWWIN`
});

export const mpbpvp = (value: number): Sourced => ({ value, source: 'experimental set of EPA/SRC MPBPVP' });

export const mmHg = (value: number, how: string, reference: string): Sourced => ({
  value: rounded(value * pascalsPerMmHg),
  source: `${reference}, ${how}, in the experimental set of EPA/SRC MPBPVP (${value} mmHg)`
});

export const mmHgFromMemory = (value: number, detail: string): Sourced => ({
  value: rounded(value * pascalsPerMmHg),
  source: `${fromMemory(detail)} (${value} mmHg)`
});

export const atmM3 = (value: number): Sourced => ({
  value: rounded(value * pascalsPerAtmosphere),
  source: `experimental set of EPA/SRC HENRYWIN (${value} atm·m³/mol)`
});

export const physprop = (value: number, reference: string, temperature: string): Sourced => ({
  value,
  source: `${reference}${temperature === '' ? '' : `, ${temperature}`}, in the PHYSPROP set of EPA/SRC HENRYWIN`
});

export const wskowwin = (value: number): Sourced => ({
  value,
  source: 'training set of EPA/SRC WSKOWWIN, 25 °C'
});

export const aqsoldb = (value: number): Sourced => ({ value, source: 'AqSolDB (curated), about 25 °C' });
