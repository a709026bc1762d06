import { describe, expect, it } from 'vitest';
import { demoExperiments } from '../../../seeders/demo/experiments';
import { simulateExperiment } from '../../../seeders/demo/generator';
import { largeInjections, largeSubstances } from '../../../seeders/demo/large-study';
import { demoPanel, demoRecovered } from '../../../seeders/demo/panel';
import type { PlannedExperiment } from '../../../seeders/demo/planned';
import { writeWorkbook } from '../../../seeders/demo/workbooks';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import type { Expectation } from '../../../src/lib/server/imports/types';

function expectationOf(experiment: PlannedExperiment): Expectation {
  return {
    experiments: [
      {
        id: experiment.key,
        title: experiment.title,
        calibrationSetId: null,
        replicates: experiment.portions.map(({ label, kind }) => ({
          id: label,
          label,
          kind,
          takesFraction: kind !== 'solvent standard',
          finalVolumeMl: null
        })),
        fractions: experiment.fractions.map(({ name }) => ({ id: name, name }))
      }
    ],
    panel: demoPanel.map(({ name, role, internalStandard }) => ({
      id: name,
      name,
      synonyms: [],
      cas: null,
      role,
      internalStandard:
        internalStandard === null ? null : { panelEntryId: internalStandard, point: experiment.standardsIn },
      hasLowestLevel: true
    })),
    calibrationSets: [],
    experimentId: experiment.key,
    declared: { basis: null, decimal: null }
  };
}

describe('the demo spreadsheets', () => {
  it.each(demoExperiments.map((experiment) => [experiment.title, experiment] as const))(
    'are read without a question: %s',
    async (_, experiment) => {
      const vials = simulateExperiment(experiment);
      const bytes = await writeWorkbook('Invented demo data', experiment.layout, vials, demoRecovered);
      const { records, problems } = mapRecords(await readWorkbook(bytes), expectationOf(experiment));
      expect(problems).toEqual([]);
      expect(records).toHaveLength(vials.length * demoRecovered.length);
      for (const record of records) {
        const place = record.place.kind === 'extract' ? record.place : null;
        const vial = vials.find(
          (one) =>
            one.sample === place?.replicateId &&
            one.fraction === place.fractionId &&
            one.injection === record.injection
        );
        expect(record.reported.value).toBe(vial?.areas.get(record.panelEntryId));
        expect([record.finalVolumeMl, record.dilution, record.aliquotShare]).toEqual([
          vial?.finalVolumeMl,
          vial?.dilution,
          vial?.aliquotShare
        ]);
      }
    }
  );

  it('hold 150 substances in 60 injections in the large study', () => {
    expect(largeInjections(1)).toHaveLength(60);
    expect(largeSubstances).toHaveLength(150);
  });
});
