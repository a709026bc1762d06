import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { QueryTypes } from 'sequelize';
import { beforeAll, describe, expect, it } from 'vitest';
import { demoLabName } from '../../../seeders/demo-accounts';
import { createDemoLab } from '../../../seeders/demo/labs';
import { lowAmount, lowScatter, lowShare } from '../../../seeders/demo/low-level-generator';
import {
  lowLevelExperiments,
  lowLevelPanel,
  lowLevelStudyCode,
  lowSampleVolumeMl
} from '../../../seeders/demo/low-level-plan';
import { seedLowLevelStudy } from '../../../seeders/demo/seed-low-level-study';
import type { Actor } from '../../../src/lib/domain/actor';
import { sequelize } from '../../../src/lib/server/db/sequelize';
import { validationView } from '../../../src/lib/server/services/validation';
import type { ValidationTable, ValidationView } from '../../../src/lib/views/validation';

/*
 * The low-level study of the demo against what its generator put in, and five of its analytes against R, which goes from areas to
 * limits by itself (tests/reference/r/limits.R).
 */
let view: ValidationView;
let actor: Actor;

beforeAll(async () => {
  const lab = await createDemoLab(demoLabName);
  await seedLowLevelStudy(lab);
  actor = lab.as('reviewer');
  view = await validationView(actor, lowLevelStudyCode, {}, (address) => address);
});

function table(part: string): ValidationTable {
  const found = view.parts.find(({ key }) => key === part)?.tables[0];
  if (!found) throw new Error(`${part} has no table`);
  return found;
}

function valueOf(part: string, analyte: string, key: string): number | null {
  const of = table(part);
  const row = of.rows.find(({ name }) => name === analyte);
  const value = row?.cells[of.columns.findIndex((column) => column.key === key)]?.value ?? null;
  return typeof value === 'number' ? value : null;
}

const targets = lowLevelPanel.filter(({ role }) => role === 'target');

describe('the limits of the demo beside its truth', () => {
  it('gives every part something to show, and none is missing of the detection limit', () => {
    for (const part of [
      'demonstration',
      'confirmation',
      'detection',
      'precision',
      'matrix',
      'blanks',
      'duplicates'
    ]) {
      expect(table(part).rows.length).toBeGreaterThan(15);
    }
    expect(view.parts.find(({ key }) => key === 'control')?.charts).toHaveLength(6);
    const detection = view.parts.find(({ key }) => key === 'detection');
    expect(detection?.missing).toEqual([]);
    expect(detection?.evidence?.state).toBe('chosen');
    expect(view.parts.find(({ key }) => key === 'horwitz')?.meaning.join(' ')).toContain('Not applied');
  });

  it('finds an MDLs that the scatter put in explains', () => {
    const low = lowLevelExperiments[1]!;
    const spikedPortion = low.portions[0]!;
    const ratios = targets.map((analyte) => {
      const found = lowAmount(analyte, low, spikedPortion) * lowShare(analyte);
      // Shifts of the steps come on top; they are small beside the rest, which the bounds allow for.
      const relative = Math.hypot(
        lowScatter.portion,
        lowScatter.day,
        lowScatter.substance * analyte.unrest,
        lowScatter.injection * Math.SQRT2
      );
      const sd = (Math.hypot(relative * found, lowScatter.noise) * 1000) / lowSampleVolumeMl;
      // t(8, 0.99) of nine preparations.
      return {
        name: analyte.name,
        ratio: (valueOf('detection', analyte.name, 'mdls') ?? Number.NaN) / (2.896 * sd)
      };
    });
    // s over sigma of nine values in three batches, at worst five degrees of freedom: chi-square at 1e-5 in each tail.
    const bounds = [Math.sqrt(0.06 / 5), Math.sqrt(30.86 / 5)] as const;
    expect(ratios.filter(({ ratio }) => !(ratio > bounds[0] && ratio < bounds[1]))).toEqual([]);
    const mean = ratios.reduce((sum, { ratio }) => sum + ratio ** 2, 0) / ratios.length;
    expect(mean).toBeGreaterThan(0.6);
    expect(mean).toBeLessThan(1.6);
  });

  it('lets the blanks decide where the lab itself adds something, and only there', () => {
    for (const { name, contaminationNg } of targets) {
      const [mdls, mdlb, mdl] = ['mdls', 'mdlb', 'mdl'].map((key) => valueOf('detection', name, key));
      expect(mdl).toBe(Math.max(mdls ?? 0, mdlb ?? 0));
      if (contaminationNg > 0) expect(mdlb ?? 0).toBeGreaterThan(mdls ?? 0);
    }
  });

  it('names the portion whose surrogates were pipetted short, and counts what is set aside nowhere', () => {
    const charts = view.parts.find(({ key }) => key === 'control')?.charts ?? [];
    for (const chart of charts.filter(({ name }) => !/d10|phenol/i.test(name))) {
      expect(chart.points.filter(({ outside }) => outside === 'rule').map(({ label }) => label)).toEqual([
        'W2-B3'
      ]);
      expect(chart.points.filter(({ counted }) => !counted).map(({ label }) => label)).toEqual(['W3-B2']);
      expect(chart.n).toBe(35);
    }
  });
});

const analytes = ['Atenolol', 'Caffeine', 'Phenol', 'Bisphenol A', 'Naphthalene'];
const script = fileURLToPath(new URL('../../reference/r/limits.R', import.meta.url));
const hasR = spawnSync('Rscript', ['--version']).status === 0;

const numbersSql = `SELECT e.number AS experiment, v.name AS analyte, r.label AS replicate, r.kind, m.state, m.reported AS area,
    m.internal_area, x.aliquot_share AS share, r.sample_volume_ml AS sample_volume, s.amount_ng AS spike, a.amount_ng AS added
  FROM measurements m JOIN injections i ON i.id = m.injection_id JOIN extracts x ON x.id = i.extract_id
  JOIN experiments e ON e.id = m.experiment_id JOIN replicates r ON r.id = x.replicate_id
  JOIN studies t ON t.id = e.study_id JOIN panel_entries p ON p.study_id = t.id AND p.analyte_id = m.analyte_id
  JOIN analyte_versions v ON v.id = p.analyte_version_id
  JOIN experiment_spikes s ON s.experiment_id = e.id AND s.panel_entry_id = p.id AND s.replicate_kind = 'spiked'
  JOIN internal_standard_additions a ON a.experiment_id = e.id AND a.panel_entry_id = p.internal_standard_entry_id
  WHERE t.code = :code AND v.name IN (:analytes) AND e.number IN (2, 3, 4)
    AND NOT EXISTS (SELECT 1 FROM exclusions z WHERE z.replicate_id = r.id AND z.lifted_at IS NULL)`;

const levelsSql = `SELECT v.name AS analyte, c.concentration_ng_per_ml AS concentration,
    k.concentration_ng_per_ml AS standard_concentration, m.reported AS area, m.internal_area
  FROM measurements m JOIN injections i ON i.id = m.injection_id JOIN calibration_sets n ON n.id = m.calibration_set_id
  JOIN studies t ON t.id = n.study_id JOIN panel_entries p ON p.study_id = t.id AND p.analyte_id = m.analyte_id
  JOIN analyte_versions v ON v.id = p.analyte_version_id
  JOIN calibration_level_concentrations c ON c.level_id = i.level_id AND c.panel_entry_id = p.id
  JOIN calibration_level_concentrations k ON k.level_id = i.level_id AND k.panel_entry_id = p.internal_standard_entry_id
  WHERE t.code = :code AND v.name IN (:analytes) AND m.state = 'value'`;

async function csvOf(sql: string): Promise<string> {
  const rows = await sequelize.query<Record<string, string | number | null>>(sql, {
    replacements: { code: lowLevelStudyCode, analytes },
    type: QueryTypes.SELECT
  });
  const heads = Object.keys(rows[0] ?? {});
  return [heads.join(','), ...rows.map((row) => heads.map((head) => row[head] ?? 'NA').join(','))].join('\n');
}

describe('five analytes of it, from areas to limits', () => {
  it.skipIf(!hasR)('agree with R to 1e-9 (skipped without R)', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'headwater-r-'));
    try {
      writeFileSync(join(folder, 'numbers.csv'), await csvOf(numbersSql));
      writeFileSync(join(folder, 'levels.csv'), await csvOf(levelsSql));
      const run = spawnSync('Rscript', ['--vanilla', script, folder], { encoding: 'utf8' });
      if (run.status !== 0) throw new Error(run.stderr);
      const lines = run.stdout.trim().split('\n');
      // Seven figures each, and MDLb for the three whose blanks gave numbers.
      expect(lines).toHaveLength(analytes.length * 7 + 3);
      const parts: Readonly<Record<string, string>> = {
        mdls: 'detection',
        mdlb: 'detection',
        mdl: 'detection',
        lower: 'confirmation',
        upper: 'confirmation',
        f: 'precision',
        repeatability: 'precision',
        intermediate: 'precision'
      };
      const strays = lines.flatMap((line) => {
        const [name = '', value = ''] = line.split('\t');
        const [analyte = '', key = ''] = name.split('/');
        const found = valueOf(parts[key] ?? '', analyte, key);
        const near = found !== null && Math.abs(found - Number(value)) <= 1e-9 * Math.abs(Number(value));
        return near ? [] : [{ name, byR: value, found }];
      });
      expect(strays).toEqual([]);
    } finally {
      rmSync(folder, { recursive: true });
    }
  });
});
