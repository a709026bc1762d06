import { describe, expect, it } from 'vitest';
import { svgFile } from '../../../src/lib/server/reports/drawing';
import { balanceCsv, compareCsv, walkBackCsv } from '../../../src/lib/server/reports/findings-csv';
import type { CompareView } from '../../../src/lib/views/findings';
import { balanceRow, balanceView } from '../charts/fixtures';

const about = { study: 'S-1', labName: 'Lab', labIsDemo: true };
const experiment = { number: 8, title: 'Eight', stageName: 'Extraction' };
const subject = {
  variant: { code: 'D', name: 'Both' },
  experiment,
  variants: [],
  experiments: []
};
/** Cells by head; the texts used here hold no comma of their own. */
function records(csv: string): Record<string, string>[] {
  const [heads = '', ...lines] = csv.replace('\uFEFF', '').trimEnd().split('\r\n');
  const names = heads.match(/"[^"]*"|[^,]+/g) ?? [];
  return lines.map((line) => {
    const cells = line.split(',');
    return Object.fromEntries(names.map((name, index) => [name.replaceAll('"', ''), cells[index] ?? '']));
  });
}

describe('findings as CSV', () => {
  it('gives each fraction of a mass balance a column that says whether it counts', () => {
    const [row] = records(
      balanceCsv(balanceView(balanceRow('NDMA', { first: 5.25, aqueous: 20 })), subject, about)
    );
    const heads = Object.keys(row ?? {});
    const inExtract = heads.filter((head) => head.endsWith('in the extract)'));
    expect(heads.filter((head) => head.endsWith('elsewhere)'))).toHaveLength(1);
    expect(inExtract).toHaveLength(2);
    expect(row?.[inExtract[0] ?? '']).toBe('5.25');
    expect(row?.Experiment).toBe('8');
    expect(row?.['Open (points)']).toBe('');
    expect(row?.Lab).toBe('Lab (invented demo data)');
  });

  it('leaves what a walk-back does not know empty, with the reason', () => {
    const loss = { stageKey: 'a', lost: 12.34567, interval: null, pAdjusted: 0.002, href: '' };
    const view = {
      stages: [
        { key: 'a', name: 'Extraction' },
        { key: 'b', name: 'Drying' }
      ],
      rows: [
        {
          panelEntryId: '1',
          name: 'Phenol',
          losses: [loss, null],
          remaining: 80,
          gap: 'No drying.',
          href: ''
        }
      ]
    };
    expect(records(walkBackCsv(view, subject, about))).toEqual([
      expect.objectContaining({
        Variant: 'D',
        'Extraction takes (points)': '12.34567',
        'Extraction, lower 95 % bound (points)': '',
        'Extraction, adjusted p': '0.002',
        'Drying takes (points)': '',
        'Left (%)': '80',
        Note: 'No drying.'
      })
    ]);
  });

  it('writes a row for each analyte in each variant, measured or not', () => {
    const counts = { inside: 0, watch: 0, outside: 1, 'too few': 0 };
    const rest = { counts, withoutVerdict: 0, worst: null, solventMl: null, minutes: null };
    const view: CompareView = {
      variants: [
        { code: 'A', name: 'First', experiment, ...rest },
        { code: 'B', name: 'Second', experiment: null, ...rest }
      ],
      rows: [
        {
          panelEntryId: '1',
          name: 'Phenol',
          class: 'phenol',
          cells: [
            {
              mean: 0,
              halfWidth: null,
              n: 5,
              verdict: 'outside',
              flagged: null,
              reason: 'mean 0 < 70',
              href: '',
              limits: [70, 130]
            },
            null
          ],
          gaps: [null, 'not measured yet']
        }
      ]
    };
    expect(
      records(compareCsv(view, about)).map((row) => [
        row.Variant,
        row['Method recovery (%)'],
        row.Verdict,
        row.Reasons
      ])
    ).toEqual([
      ['A', '0', 'outside', 'mean 0 < 70'],
      ['B', '', '', 'not measured yet']
    ]);
  });
});

describe('a drawing as a file', () => {
  it('holds colours instead of tokens, and no marks of the page', () => {
    expect(svgFile('<!--[--><svg fill="var(--ink)"></svg><!--]-->')).toBe(
      '<?xml version="1.0" encoding="UTF-8"?>\n<svg fill="#1E2A2F"></svg>\n'
    );
    expect(() => svgFile('<svg fill="var(--nothing)"></svg>')).toThrow(RangeError);
  });
});
