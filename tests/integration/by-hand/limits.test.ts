import ExcelJS from 'exceljs';
import { beforeAll, describe, expect, it } from 'vitest';
import { percentText } from '../../../src/lib/domain/figure-text';
import { resultsCsv } from '../../../src/lib/server/reports/results-csv';
import { summaryWorkbook } from '../../../src/lib/server/reports/summary-xlsx';
import { massBalanceView, resultsTableView } from '../../../src/lib/server/services/results';
import { exportedSummary, summaryView } from '../../../src/lib/server/services/summaries';
import { openBench, portions, type Bench, type Row } from './bench';

/*
 * 69.97 % against 70 is outside and must not read as 70 anywhere; 70 itself is inside. Five preparations each, 100 ng spiked, ng brought:
 * 69.87, 69.92, 69.97, 70.02, 70.07 have the mean 69.97; five times 70 the mean 70, SD 0; 80 and 120 around 100: SD 20 % and a little.
 */
const found = {
  Underlin: [69.87, 69.92, 69.97, 70.02, 70.07],
  Onlinin: [70, 70, 70, 70, 70],
  // Mean 100; squares 2 · 20.02² + 2 · 20.02² = 1603.2016, over 4: SD = RSD = 20.02 > 20.
  Scatterin: [79.98, 79.98, 100, 120.02, 120.02]
} as const;
let bench: Bench;
let experiment: number;

beforeAll(async () => {
  bench = await openBench();
  for (const name of Object.keys(found)) await bench.entry(name);
  experiment = await bench.experiment({
    spikes: [{ kind: 'spiked', targetsNg: '100' }],
    replicates: [portions('spiked', ['S1', 'S2', 'S3', 'S4', 'S5'])]
  });
  const rows = Object.entries(found).flatMap(([name, values]) =>
    values.map((value, index): Row => [`S${index + 1}`, name, String(value).replace('.', ',')])
  );
  await bench.upload([['Sample', 'Analyte', 'Amount (ng)'], ...rows], { experiment });
});

describe('a figure beside its limit', () => {
  it('is judged unrounded', async () => {
    const under = await bench.result(experiment, 'Underlin');
    expect(under.mean).toBeCloseTo(69.97, 10);
    expect(under).toMatchObject({ verdict: 'outside', reasons: ['mean 69.97 < 70'] });
    expect(await bench.result(experiment, 'Onlinin')).toMatchObject({ mean: 70, verdict: 'inside' });
    const scattered = await bench.result(experiment, 'Scatterin');
    expect(scattered.rsd).toBeCloseTo(20.02, 10);
    expect(scattered).toMatchObject({ verdict: 'outside', reasons: ['RSD 20.02 > 20'] });
  });

  it('carries its limits, so that the page writes 69.97 and 20.02', async () => {
    const under = await bench.result(experiment, 'Underlin');
    expect(percentText(under.mean ?? 0, under.limits.mean)).toBe('69.97');
    const on = await bench.result(experiment, 'Onlinin');
    expect(percentText(on.mean ?? 0, on.limits.mean)).toBe('70.0');
    const scattered = await bench.result(experiment, 'Scatterin');
    expect(percentText(scattered.rsd ?? 0, scattered.limits.rsd)).toBe('20.02');
  });
});

describe('the page, the CSV, the summary and the workbook', () => {
  it('hold one and the same figures', async () => {
    const { results } = await resultsTableView(bench.actor, bench.code, { experiment }, (address) => address);
    const rows = results?.rows ?? [];
    expect(rows.map(({ name }) => name)).toEqual(Object.keys(found));

    const csv = resultsCsv(results!, {
      study: bench.code,
      labName: 'Weir House Laboratory',
      labIsDemo: false
    });
    const lines = csv.trim().split(/\r?\n/).slice(1);
    const { balance } = await massBalanceView(bench.actor, bench.code, { experiment }, (address) => address);
    const summary = await summaryView(bench.actor, bench.code, (address) => address);
    const book = new ExcelJS.Workbook();
    const exported = await exportedSummary(bench.actor, bench.code, 'http://lab.test');
    const chunks: Buffer[] = [];
    for await (const chunk of summaryWorkbook(exported, 'http://lab.test', { by: 'a test', at: new Date(0) }))
      chunks.push(Buffer.from(chunk as Uint8Array));
    // The type that the library asks for is older than Node's own.
    await book.xlsx.load(Buffer.concat(chunks) as unknown as ArrayBuffer);
    const sheet = book.getWorksheet('Results');

    for (const [index, row] of rows.entries()) {
      expect(lines[index]).toContain(`,${row.name},`);
      expect(lines[index]).toContain(`,${row.mean},`);
      expect(lines[index]).toContain(`,${row.rsd},`);
      expect(balance.rows[index]?.method?.mean).toBe(row.mean);
      expect(summary.findings[0]?.results.rows[index]).toMatchObject({
        mean: row.mean,
        sd: row.sd,
        rsd: row.rsd
      });
      const cells: ExcelJS.Cell[] = [];
      sheet?.eachRow((line) => {
        if (line.getCell(3).text === row.name) cells.push(line.getCell(5), line.getCell(9));
      });
      expect(cells.map(({ value }) => value)).toEqual([row.mean, row.rsd]);
      // Shown as the number format writes it, a figure stays on its side.
      const decimals = cells.map(({ numFmt }) => numFmt.split('.')[1]?.length ?? 0);
      const shown = cells.map(({ value }, at) => Number(value).toFixed(decimals[at]));
      if (row.name === 'Underlin') expect(shown[0]).toBe('69.97');
      if (row.name === 'Onlinin') expect(shown[0]).toBe('70.0');
      if (row.name === 'Scatterin') expect(shown[1]).toBe('20.02');
    }
  });
});
