/** What of an analyte decides how it behaves in an extraction. */
export interface GroupedAnalyte {
  readonly id: string;
  readonly name: string;
  readonly logKow: number | null;
  readonly pkaAcid: readonly number[];
  readonly pkaBase: readonly number[];
  readonly boilingPointC: number | null;
  readonly henryPaM3Mol: number | null;
}

export interface ChemistryGroup {
  readonly key:
    'unknown' | 'cation' | 'anion' | 'both' | 'neutral' | 'volatile' | 'hydrophilic' | 'hydrophobic';
  readonly title: string;
  /** What the group asks of the procedure. */
  readonly question: string;
  readonly names: readonly string[];
}

/** Ionised share of an acid at a pH: 1/(1 + 10^(pKa - pH)) (Henderson and Hasselbalch); pH and pKa without unit. */
export function ionisedAcid(pka: number, ph: number): number {
  return 1 / (1 + 10 ** (pka - ph));
}

/** Ionised share of a base at a pH: 1/(1 + 10^(pH - pKa)), pKa that of the conjugate acid. */
export function ionisedBase(pka: number, ph: number): number {
  return 1 / (1 + 10 ** (ph - pka));
}

/** The charge that most of an analyte carries at a pH: half of it or more counts. */
export function chargeAt(
  analyte: Pick<GroupedAnalyte, 'pkaAcid' | 'pkaBase'>,
  ph: number
): 'cation' | 'anion' | 'both' | 'neutral' {
  const acid = analyte.pkaAcid.some((pka) => ionisedAcid(pka, ph) >= 0.5);
  const base = analyte.pkaBase.some((pka) => ionisedBase(pka, ph) >= 0.5);
  return acid && base ? 'both' : acid ? 'anion' : base ? 'cation' : 'neutral';
}

// Limits that are common practice, no source: they raise a question and decide nothing.
const volatileBoilingPointC = 220;
const volatileHenry = 1;
const hydrophilicLogKow = 0;
const hydrophobicLogKow = 5;

const isVolatile = (analyte: GroupedAnalyte): boolean =>
  (analyte.boilingPointC !== null && analyte.boilingPointC < volatileBoilingPointC) ||
  (analyte.henryPaM3Mol !== null && analyte.henryPaM3Mol > volatileHenry);

/**
 * Sorts analytes into the groups that decide sorbent, pH, elution and concentration. Everything stands in one group of charge;
 * the others come on top of that. Empty groups are left out.
 */
export function chemistryGroups(analytes: readonly GroupedAnalyte[], ph = 7): readonly ChemistryGroup[] {
  const named = (belongs: (analyte: GroupedAnalyte) => boolean): readonly string[] =>
    analytes.filter(belongs).map(({ name }) => name);
  // Without a pKa an analyte may be neutral or unknown; one without log Kow too has never been looked up.
  const isUnknown = ({ pkaAcid, pkaBase, logKow }: GroupedAnalyte): boolean =>
    pkaAcid.length === 0 && pkaBase.length === 0 && logKow === null;
  const charged = (charge: ReturnType<typeof chargeAt>) =>
    named((analyte) => !isUnknown(analyte) && chargeAt(analyte, ph) === charge);
  const groups: readonly ChemistryGroup[] = [
    {
      key: 'cation',
      title: `Positive at pH ${ph}`,
      question:
        'A neutral sorbent may let them pass. Would a cation exchanger hold them, and what releases them again?',
      names: charged('cation')
    },
    {
      key: 'anion',
      title: `Negative at pH ${ph}`,
      question: 'Acidified they are neutral. Would a lower pH or an anion exchanger hold them?',
      names: charged('anion')
    },
    {
      key: 'both',
      title: `Both charges at pH ${ph}`,
      question: 'No pH makes them wholly neutral. Which phase holds either end?',
      names: charged('both')
    },
    {
      key: 'neutral',
      title: `No charge at pH ${ph}`,
      question: 'A reversed phase should hold them, the less the more hydrophilic they are.',
      names: charged('neutral')
    },
    {
      key: 'hydrophilic',
      title: 'Very hydrophilic, log Kow below 0',
      question: 'They may break through early. Is the sample volume too large, or a second cartridge needed?',
      names: named(({ logKow }) => logKow !== null && logKow < hydrophilicLogKow)
    },
    {
      key: 'hydrophobic',
      title: 'Very hydrophobic, log Kow above 5',
      question: 'They cling to glass and to suspended matter. Is the bottle rinsed, and the filter measured?',
      names: named(({ logKow }) => logKow !== null && logKow > hydrophobicLogKow)
    },
    {
      key: 'volatile',
      title: 'Volatile',
      question: 'They may leave with the solvent while it is concentrated. How far down, and how warm?',
      names: named(isVolatile)
    },
    {
      key: 'unknown',
      title: 'Not known',
      question: 'The library holds neither pKa nor log Kow of these, so nothing can be said of their charge.',
      names: named(isUnknown)
    }
  ];
  return groups.filter(({ names }) => names.length > 0);
}
