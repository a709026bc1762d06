import { givenText } from '../../domain/given-text';
import { placeByCharge, type ChargeKey } from './charge-place';
import { documents, practice, type Finding, type Origin } from './evidence';
import type { PanelAnalyte } from './panel-analyte';
import { checkedRange, type PhRange } from './ph-windows';
import { notNegative, share as checkedShare } from './guards';
import { workingRanges } from './sorbents';
import { shareText } from './text';
import { ChemistryError } from './errors';
import { volatility, type Volatility } from './volatility';

export type ChemistryGroupKey =
  'neutral' | 'acid' | 'base' | 'both' | 'charged' | 'hydrophilic' | 'hydrophobic' | 'volatile' | 'unknown';

/** An analyte in a group, with what put it there. */
export interface GroupMember {
  readonly id: string;
  readonly name: string;
  readonly evidence: string;
}

export interface ChemistryGroup extends Origin {
  readonly key: ChemistryGroupKey;
  readonly title: string;
  /** What the group asks of the procedure. */
  readonly question: string;
  readonly names: readonly string[];
  readonly members: readonly GroupMember[];
  /** What published methods say to it; for volatile analytes those of the most volatile one. */
  readonly findings: readonly Finding[];
}

export interface GroupingOptions {
  /** Working range of pH; that of bonded silica when left out. */
  readonly range?: PhRange;
  /** Share that counts as neutral or charged. */
  readonly share?: number;
  readonly finalVolumeMl?: number | null;
}

// Limits that are common practice, no source: they raise a question and decide nothing.
const hydrophilicLogKow = 0;
const hydrophobicLogKow = 5;

/**
 * Sorts a panel into the groups that argue for one pass or two, an ion exchanger, a second cartridge, a rinse or a gentler
 * evaporation. Each analyte stands in one group of charge (or in `unknown`); the others come on top.
 *
 * - `neutral`: at least `share` neutral over the whole working range; an analyte without any pKa counts here and its evidence says so
 * - `acid` and `base`: neutral below, or above, a pH; `both`: acid and base groups, neutral between two pH values or nowhere
 * - `charged`: a permanent charge, or one sign and at least `share` charged over the whole range
 * - `hydrophilic` log Kow below 0, `hydrophobic` above 5, `volatile` by {@link volatility}: limits are common practice
 * @returns groups that have members, in this order
 * @throws ChemistryError for a range that is not in order or a share outside 0 to 1; values of an analyte that are impossible put
 * it into `unknown` with the reason
 */
export function chemistryGroups(
  analytes: readonly PanelAnalyte[],
  { range = workingRanges.c18, share = 0.99, finalVolumeMl = null }: GroupingOptions = {}
): readonly ChemistryGroup[] {
  const { low, high } = checkedRange(range);
  checkedShare(share, 'The share');
  if (finalVolumeMl !== null) notNegative(finalVolumeMl, 'The final volume');
  const placed = analytes.map((analyte) => placeByCharge(analyte, { low, high }, share));
  const byCharge = (key: ChargeKey): readonly GroupMember[] =>
    analytes.flatMap(({ id, name }, i) =>
      placed[i]!.key === key ? [{ id, name, evidence: placed[i]!.evidence }] : []
    );
  const byKow = (is: (logKow: number) => boolean): readonly GroupMember[] =>
    analytes.flatMap(({ id, name, logKow, logKowIsPredicted }) =>
      logKow !== null && is(logKow)
        ? [{ id, name, evidence: `log Kow ${givenText(logKow)}${logKowIsPredicted ? ', predicted' : ''}` }]
        : []
    );
  const evaporating = analytes.flatMap((analyte) => evaporatingMember(analyte, finalVolumeMl));
  const percent = shareText(share);
  const group = (
    key: ChemistryGroupKey,
    title: string,
    question: string,
    members: readonly GroupMember[],
    more: { readonly origin?: Origin; readonly findings?: readonly Finding[] } = {}
  ): ChemistryGroup => ({
    key,
    title,
    question,
    members,
    names: members.map(({ name }) => name),
    findings: more.findings ?? [],
    ...(more.origin ?? practice)
  });
  const phText = `from pH ${low} to ${high}`;
  return [
    group(
      'neutral',
      `Neutral ${phText}`,
      'A reversed phase should hold them, the less the more hydrophilic they are. Does any other analyte decide the pH?',
      byCharge('neutral')
    ),
    group(
      'acid',
      'Acids',
      `Acidified they are neutral. Does the sorbent stand a pH at which ${percent} of them is, or would an anion exchanger serve better?`,
      byCharge('acid'),
      { findings: [silicaLimit, acidsAcid] }
    ),
    group(
      'base',
      'Bases',
      `Made alkaline they are neutral. Does the sorbent stand a pH at which ${percent} of them is, or would a cation exchanger serve better?`,
      byCharge('base'),
      { findings: [silicaLimit, basesBasic] }
    ),
    group(
      'both',
      'Acid and base at once',
      'Between their groups they may carry both charges. Is there a pH at which a phase holds one of them, and the other does not push away?',
      byCharge('both')
    ),
    group(
      'charged',
      `Charged ${phText}`,
      'No pH of this range makes them neutral. Would an ion exchanger hold them, and what releases them again?',
      byCharge('charged')
    ),
    group(
      'hydrophilic',
      'Very hydrophilic, log Kow below 0',
      'They may break through early. Is the sample volume too large, or a second cartridge of another kind needed?',
      byKow((logKow) => logKow < hydrophilicLogKow)
    ),
    group(
      'hydrophobic',
      'Very hydrophobic, log Kow above 5',
      'They cling to glass and to suspended matter. Is the bottle rinsed, and the filter measured?',
      byKow((logKow) => logKow > hydrophobicLogKow)
    ),
    group(
      'volatile',
      'Volatile',
      'They may leave with the solvent while it is concentrated. How far down, and how warm?',
      evaporating.map(({ member }) => member),
      { findings: volatileFindings(evaporating) }
    ),
    group(
      'unknown',
      'Not known',
      'Nothing can be said of their charge. Who has their pKa and log Kow?',
      byCharge('unknown')
    )
  ].filter(({ members }) => members.length > 0);
}

const silicaLimit: Finding = {
  text: 'Bonded silica stands pH 2 to 9.',
  evidence: 'Below and above, it hydrolyses.',
  ...documents.solidPhase('4.3')
};
const acidsAcid: Finding = {
  text: 'Phenols are extracted from acid.',
  evidence: 'Named among what needs care.',
  ...documents.gcMs('1.4.8')
};
const basesBasic: Finding = {
  text: 'Aniline and pyridine are extracted from alkaline water.',
  evidence: 'Named among what needs care.',
  ...documents.gcMs('1.4.8')
};

type Evaporating = { readonly member: GroupMember; readonly volatility: Volatility };

function evaporatingMember(analyte: PanelAnalyte, finalVolumeMl: number | null): readonly Evaporating[] {
  const { id, name, boilingPointC, henryPaM3Mol, vapourPressurePa = null } = analyte;
  let found: Volatility;
  try {
    found = volatility({ boilingPointC, henryPaM3Mol, vapourPressurePa }, finalVolumeMl);
  } catch (error) {
    // A value that cannot be is no evidence; the library's own page shows it.
    if (error instanceof ChemistryError) return [];
    throw error;
  }
  // What leaves water and yet boils high stays in the extract.
  const may =
    found.level === 'high' || found.level === 'some' || (found.level === 'unknown' && found.leavesWater);
  if (!may) return [];
  return [{ member: { id, name, evidence: found.reasons.join(', ') }, volatility: found }];
}

/** What the most volatile one asks, and what leaving water asks where any does; each text once. */
function volatileFindings(evaporating: readonly Evaporating[]): readonly Finding[] {
  const first = (is: (found: Volatility) => boolean) =>
    evaporating.find(({ volatility: found }) => is(found))?.volatility.findings ?? [];
  const byLevel = first(({ level }) => level === 'high');
  const all = [
    ...(byLevel.length > 0 ? byLevel : first(({ level }) => level === 'some')),
    ...first(({ leavesWater, level }) => leavesWater && level !== 'unknown')
  ];
  return [...new Map(all.map((finding) => [finding.text, finding])).values()];
}
