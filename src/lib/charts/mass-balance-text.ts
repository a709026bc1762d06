import { percentText } from '$lib/domain/figure-text';
import { bandText } from '$lib/domain/recovery-band';
import type { MassBalanceRow, MassBalanceView } from '$lib/views/mass-balance';

/** What the chart shows, in a sentence for those who do not see it. */
export function massBalanceDescription(view: MassBalanceView): string {
  const count = (verdict: MassBalanceRow['verdict']): number =>
    view.rows.filter((row) => row.verdict === verdict).length;
  const parts = [
    `${count('inside')} inside`,
    `${count('watch')} on watch`,
    `${count('outside')} outside`,
    ...(count('too few') > 0 ? [`${count('too few')} with too few preparations`] : []),
    ...(count(null) > 0 ? [`${count(null)} without a verdict`] : [])
  ];
  const limits = bandText(view.criteria);
  return `${view.rows.length} analytes, percent of the spike by fraction; ${limits === null ? 'no criteria for mean recovery' : `criteria ${limits} on the extract`}: ${parts.join(', ')}.`;
}

/** A row as it is read aloud: "NDMA, 49.3 ± 3.6 %, outside: 49.3 < 70". */
export function rowSentence(row: MassBalanceRow, limits: readonly number[]): string {
  const figure = row.method
    ? `${percentText(row.method.mean, limits)}${row.method.halfWidth === null ? '' : ` ± ${percentText(row.method.halfWidth)}`} %`
    : 'no method recovery';
  const verdict = row.verdict ?? 'no verdict';
  const reasons = row.reasons.length > 0 ? `: ${row.reasons.join(', ')}` : '';
  return `${row.name}, ${figure}, ${verdict}${reasons}`;
}

export interface MassBalanceNote {
  readonly panelEntryId: string;
  readonly name: string;
  readonly text: string;
}

/** What a bar cannot show: why there is no verdict, what a balance lacks. */
export function massBalanceNotes(view: MassBalanceView): MassBalanceNote[] {
  return view.rows.flatMap(({ panelEntryId, name, verdict, reasons, incomplete }) => {
    const why = verdict === null ? reasons : [];
    const text = [...why, ...(incomplete === null ? [] : [incomplete])].join('; ');
    return text === '' ? [] : [{ panelEntryId, name, text }];
  });
}
