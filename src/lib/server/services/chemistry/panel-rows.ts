import type { ChemistryGroupView } from '../../../views/chemistry';
import type { ChargeGroupView, PanelChemistryRow } from '../../../views/panel-chemistry';
import { logD, type ChemistryGroup, type ChemistryGroupKey } from '../../chemistry';
import { isNeutral } from './panel-lead';
import type { PanelSubstance } from './panel-substances';
import { chargeAt, chargeCurve, type ReadSubstance } from './read-substance';

/** Groups that an analyte belongs to beside the one of its charge, in a word or two. */
const further = {
  hydrophilic: 'very hydrophilic',
  hydrophobic: 'very hydrophobic',
  volatile: 'volatile'
} as const satisfies Partial<Record<ChemistryGroupKey, string>>;

const isFurther = (key: ChemistryGroupKey): key is keyof typeof further => Object.hasOwn(further, key);

/** Panel entries by their id, as far as groups need them. */
type Reads = readonly ReadSubstance<PanelSubstance>[];

function rowOf(
  { substance, logKow, charge }: ReadSubstance<PanelSubstance>,
  ph: number,
  href: (entryId: string) => string,
  group: Readonly<{ evidence: string; also: readonly string[] }>
): PanelChemistryRow {
  const at = charge.known ? chargeAt(charge.groups, ph) : null;
  return {
    panelEntryId: substance.entryId,
    analyteId: substance.id,
    name: substance.name,
    role: substance.role,
    class: substance.class,
    also: group.also,
    evidence: group.evidence,
    pkaAcid: substance.pkaAcid,
    pkaBase: substance.pkaBase,
    logKow,
    neutral: at && at.shares.neutral,
    charge: at && at.charge,
    logD: charge.known && logKow ? logD(logKow.value, charge.groups, ph).logD : null,
    href: href(substance.entryId),
    ...chargeCurve(charge)
  };
}

/** Where a row turns, for an order in which the strips of a group read as one slope: its strongest acid, else its strongest base. */
function turn({ pkaAcid, pkaBase }: PanelChemistryRow): number {
  if (pkaAcid.length > 0) return Math.min(...pkaAcid);
  return pkaBase.length > 0 ? Math.max(...pkaBase) : 99;
}

export type RowOrder = 'pka' | 'name' | 'panel';

const orders: Readonly<Record<RowOrder, (a: PanelChemistryRow, b: PanelChemistryRow) => number>> = {
  pka: (a, b) => turn(a) - turn(b) || a.name.localeCompare(b.name),
  name: (a, b) => a.name.localeCompare(b.name),
  panel: () => 0
};

function atPhText(rows: readonly PanelChemistryRow[], ph: number): string {
  const known = rows.filter(({ neutral }) => neutral !== null);
  if (known.length === 0) return '';
  const neutral = known.filter(isNeutral).length;
  if (known.length === 1) return `At pH ${ph} it is ${neutral === 1 ? '' : 'not '}at least 99 % neutral.`;
  const many = neutral === known.length ? 'all' : neutral === 0 ? 'none' : `${neutral} of ${known.length}`;
  return `At pH ${ph}, ${many} ${neutral < 2 ? 'is' : 'are'} at least 99 % neutral.`;
}

/** The groups of charge with their rows, every analyte once, and the groups that come on top of them. */
export function groupedRows(
  reads: Reads,
  groups: readonly ChemistryGroup[],
  at: Readonly<{ ph: number; order: RowOrder; href: (entryId: string) => string }>
): { readonly groups: readonly ChargeGroupView[]; readonly further: readonly ChemistryGroupView[] } {
  const alsoOf = (id: string): readonly string[] =>
    groups.flatMap(({ key, members }) =>
      isFurther(key) && members.some((member) => member.id === id) ? [further[key]] : []
    );
  const byId = new Map(reads.map((read) => [read.substance.entryId, read]));
  const charged = groups.filter(({ key }) => !isFurther(key));
  return {
    groups: charged.map(({ members, names: _names, ...group }) => {
      const rows = members.flatMap(({ id, evidence }) => {
        const read = byId.get(id);
        return read ? [rowOf(read, at.ph, at.href, { evidence, also: alsoOf(id) })] : [];
      });
      return { ...group, atPh: atPhText(rows, at.ph), rows: rows.sort(orders[at.order]) };
    }),
    further: groups.filter(({ key }) => isFurther(key))
  };
}
