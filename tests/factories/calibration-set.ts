import { CalibrationLevel } from '../../src/lib/server/db/models/calibration-level';
import { CalibrationLevelConcentration } from '../../src/lib/server/db/models/calibration-level-concentration';
import { CalibrationSet } from '../../src/lib/server/db/models/calibration-set';
import type { Study } from '../../src/lib/server/db/models/study';

export interface MadeCalibrationSet {
  readonly set: CalibrationSet;
  readonly levels: readonly CalibrationLevel[];
}

/** A calibration set whose levels hold the given concentrations (ng/mL) of each panel entry. */
export async function makeCalibrationSet(
  study: Study,
  overrides: Readonly<
    Partial<{ name: string; concentrations: readonly number[]; panelEntryIds: readonly string[] }>
  > = {}
): Promise<MadeCalibrationSet> {
  const ids = { labId: study.labId, studyId: study.id };
  const set = await CalibrationSet.create({
    ...ids,
    name: overrides.name ?? 'March standards',
    instrument: 'Instrument 1',
    calibratedOn: '2026-03-02',
    defaultModel: 'average response factor',
    defaultWeighting: 'none'
  });
  const levels: CalibrationLevel[] = [];
  for (const [index, concentration] of (overrides.concentrations ?? [1, 2, 5, 10, 20]).entries()) {
    const level = await CalibrationLevel.create({
      ...ids,
      calibrationSetId: set.id,
      number: index + 1,
      label: `L${index + 1}`
    });
    levels.push(level);
    for (const panelEntryId of overrides.panelEntryIds ?? []) {
      await CalibrationLevelConcentration.create({
        ...ids,
        levelId: level.id,
        panelEntryId,
        concentrationNgPerMl: concentration
      });
    }
  }
  return { set, levels };
}
