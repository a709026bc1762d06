import { createHash } from 'node:crypto';
import { nameKey } from '../../domain/name-key';
import type { ColumnMeaning, MapColumn } from '../../schemas/column-map';
import type { HeaderColumn, SheetLayout } from './find-layout';
import type { Header, StatedKind } from './read-header';
import type { RecogniseContext, SheetMap } from './recognise-table';

const meaningOf = {
  sample: 'sample',
  experiment: 'experiment',
  fraction: 'fraction',
  analyte: 'analyte',
  cas: 'cas',
  'internal area': 'internal standard area',
  limit: 'limit',
  retentionTime: 'retention time',
  ionRatio: 'ion ratio',
  signalToNoise: 'signal to noise',
  manualIntegration: 'manual integration',
  manualCause: 'manual integration cause',
  finalVolume: 'final volume',
  dilution: 'dilution',
  aliquotShare: 'aliquot share',
  injection: 'injection',
  acquiredAt: 'acquired at',
  sampleVolume: 'sample volume',
  sampleMass: 'sample mass',
  ignored: 'ignored',
  unknown: 'not understood'
} as const satisfies Record<Exclude<Header['meaning'], 'value'>, ColumnMeaning>;

type Stated = Pick<SheetLayout, 'columns' | 'titleKind'>;

/** A bare "Result" takes what it is from a title, or is an area where the others are. */
export function mapColumn(
  { column, text, header }: HeaderColumn,
  layout: Stated,
  context: RecogniseContext
): MapColumn {
  const analyte = 'analyte' in header && header.analyte !== null ? context.nameOf(header.analyte) : null;
  const base = {
    column,
    header: text.slice(0, 300),
    analyte,
    basis: null,
    unit: header.unit?.slice(0, 40) ?? null
  };
  if (header.meaning !== 'value') return { ...base, means: meaningOf[header.meaning] };
  const hasAreas = layout.columns.some(
    ({ header: other }) =>
      other.meaning === 'internal area' || (other.meaning === 'value' && other.kind === 'area')
  );
  const stated: { readonly kind: StatedKind; readonly unit: string | null } =
    header.kind === 'result' && header.unit === null
      ? (layout.titleKind ?? { kind: hasAreas ? 'area' : 'result', unit: null })
      : header;
  if (stated.kind === 'area') return { ...base, means: 'area', unit: null };
  return {
    ...base,
    means: 'amount',
    basis: stated.kind === 'concentration' || stated.kind === 'result' ? null : stated.kind,
    unit: (header.unit ?? stated.unit)?.slice(0, 40) ?? null
  };
}

/** By the headers and the orientation; the names of analytes do not count, nor how many there are side by side. */
export function fingerprintOf({
  orientation,
  columns,
  carried
}: Pick<SheetMap, 'orientation' | 'columns' | 'carried'>): string {
  const heads = columns.map(({ header, means, analyte }) =>
    analyte === null ? nameKey(header) || header.trim() : `* ${means}`
  );
  const distinct = heads.filter((head, index) => !head.startsWith('* ') || heads.indexOf(head) === index);
  const text = JSON.stringify([orientation, carried.map(({ names, from }) => [names, from]), distinct]);
  return createHash('sha256').update(text).digest('hex').slice(0, 32);
}
