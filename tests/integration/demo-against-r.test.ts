import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { QueryTypes } from 'sequelize';
import { beforeAll, describe, expect, it } from 'vitest';
import { demoLabName } from '../../seeders/demo-accounts';
import { createDemoLab } from '../../seeders/demo/labs';
import { demoStudyCode, seedDemoStudy } from '../../seeders/demo/study';
import type { Actor } from '../../src/lib/domain/actor';
import { sequelize } from '../../src/lib/server/db/sequelize';
import { resultsTableView } from '../../src/lib/server/services/results';

/*
 * Five analytes of the demo, read straight from the tables as the instrument's areas, go through R alone (tests/reference/r/demo.R: lm
 * for the calibration lines, mean, sd and t.test for the recoveries) and through the program. Both have to agree to 1e-9.
 */
const analytes = ['Metformin', 'Propranolol', 'Caffeine', 'Diuron', 'Ibuprofen'];
/** One without anything subtracted, its standards in the vial; one with standards in the extract, that loses the native amount by batch. */
const experiments = [2, 8];

const script = fileURLToPath(new URL('../reference/r/demo.R', import.meta.url));
const hasR = spawnSync('Rscript', ['--version']).status === 0;

let actor: Actor;

beforeAll(async () => {
  if (!hasR) return;
  const lab = await createDemoLab(demoLabName);
  await seedDemoStudy(lab);
  actor = lab.as('reviewer');
});

const numbersSql = `SELECT e.number AS experiment, v.name AS analyte, r.label AS replicate, r.kind, coalesce(r.batch, 'none') AS batch,
    f.counts_as, m.state, m.reported AS area, m.internal_area, x.final_volume_ml AS volume, i.dilution, x.aliquot_share AS share,
    coalesce(r.sample_volume_ml, 1) AS sample_volume, e.subtract, s.amount_ng AS spike, coalesce(a.point, 'none') AS point,
    coalesce(a.amount_ng, a.concentration_ng_per_ml) AS added
  FROM measurements m JOIN injections i ON i.id = m.injection_id JOIN extracts x ON x.id = i.extract_id
  JOIN experiments e ON e.id = m.experiment_id JOIN replicates r ON r.id = x.replicate_id JOIN fractions f ON f.id = x.fraction_id
  JOIN studies t ON t.id = e.study_id JOIN panel_entries p ON p.study_id = t.id AND p.analyte_id = m.analyte_id
  JOIN analyte_versions v ON v.id = p.analyte_version_id
  JOIN experiment_spikes s ON s.experiment_id = e.id AND s.panel_entry_id = p.id AND s.replicate_kind = 'spiked'
  LEFT JOIN internal_standard_additions a ON a.experiment_id = e.id AND a.panel_entry_id = p.internal_standard_entry_id
  WHERE t.code = :code AND v.name IN (:analytes) AND e.number IN (:experiments) AND r.kind IN ('spiked', 'unspiked')
    AND NOT EXISTS (SELECT 1 FROM exclusions z WHERE z.replicate_id = r.id AND z.lifted_at IS NULL)`;

const levelsSql = `SELECT e.number AS experiment, v.name AS analyte, c.concentration_ng_per_ml AS concentration,
    k.concentration_ng_per_ml AS standard_concentration, m.reported AS area, m.internal_area,
    replace(n.default_model, ' ', '_') AS model, n.default_weighting AS weighting
  FROM experiments e JOIN studies t ON t.id = e.study_id JOIN measurements m ON m.calibration_set_id = e.calibration_set_id
  JOIN injections i ON i.id = m.injection_id JOIN calibration_sets n ON n.id = m.calibration_set_id
  JOIN panel_entries p ON p.study_id = t.id AND p.analyte_id = m.analyte_id JOIN analyte_versions v ON v.id = p.analyte_version_id
  JOIN calibration_level_concentrations c ON c.level_id = i.level_id AND c.panel_entry_id = p.id
  LEFT JOIN calibration_level_concentrations k ON k.level_id = i.level_id AND k.panel_entry_id = p.internal_standard_entry_id
  WHERE t.code = :code AND v.name IN (:analytes) AND e.number IN (:experiments) AND m.state = 'value'`;

async function csvOf(sql: string): Promise<string> {
  const rows = await sequelize.query<Record<string, string | number | null>>(sql, {
    replacements: { code: demoStudyCode, analytes, experiments },
    type: QueryTypes.SELECT
  });
  const [first] = rows;
  if (!first) throw new Error('the demo holds no such numbers');
  const heads = Object.keys(first);
  // The shortest text that gives the same double again.
  const lines = rows.map((row) => heads.map((head) => row[head] ?? 'NA').join(','));
  return [heads.join(','), ...lines].join('\n');
}

async function byR(): Promise<ReadonlyMap<string, number>> {
  const folder = mkdtempSync(join(tmpdir(), 'headwater-r-'));
  try {
    writeFileSync(join(folder, 'numbers.csv'), await csvOf(numbersSql));
    writeFileSync(join(folder, 'levels.csv'), await csvOf(levelsSql));
    const run = spawnSync('Rscript', ['--vanilla', script, folder], { encoding: 'utf8' });
    if (run.status !== 0) throw new Error(run.stderr);
    return new Map(
      run.stdout
        .trim()
        .split('\n')
        .map((line) => {
          const [name = '', value = ''] = line.split('\t');
          return [name, Number(value)] as const;
        })
    );
  } finally {
    rmSync(folder, { recursive: true });
  }
}

describe('five analytes of the demo, from areas to recoveries', () => {
  it.skipIf(!hasR)('agree with R to 1e-9 (skipped without R)', async () => {
    const expected = await byR();
    const found = new Map<string, number>();
    for (const experiment of experiments) {
      const { results } = await resultsTableView(actor, demoStudyCode, { experiment }, (address) => address);
      for (const row of results?.rows ?? []) {
        if (!analytes.includes(row.name)) continue;
        const key = `${experiment}/${row.name}`;
        found.set(`${key}/n`, row.n ?? Number.NaN);
        found.set(`${key}/mean`, row.mean ?? Number.NaN);
        found.set(`${key}/sd`, row.sd ?? Number.NaN);
        if (row.subtracted !== null) continue;
        found.set(`${key}/lower`, row.interval?.lower ?? Number.NaN);
        found.set(`${key}/upper`, row.interval?.upper ?? Number.NaN);
      }
    }
    expect([...found.keys()].sort()).toEqual([...expected.keys()].sort());
    expect(found.size).toBe(analytes.length * (5 + 3));
    const strays = [...expected].filter(([name, value]) => {
      const own = found.get(name) ?? Number.NaN;
      return !(Math.abs(own - value) <= 1e-9 * Math.abs(value));
    });
    expect(strays.map(([name, value]) => ({ name, value, found: found.get(name) }))).toEqual([]);
  });
});
