import type { Actor } from '../../src/lib/domain/actor';
import { PanelEntry } from '../../src/lib/server/db/models/panel-entry';
import { audit, inTransaction } from '../../src/lib/server/db/transaction';
import { createCalibrationSet } from '../../src/lib/server/services/calibrations';
import { createExperiment } from '../../src/lib/server/services/experiments';
import { getPanel, pastePanel } from '../../src/lib/server/services/panels';
import { createStudy, getStudy } from '../../src/lib/server/services/studies';
import { createVariant } from '../../src/lib/server/services/variants';
import { addToLibrary } from '../library/stock-library';
import type { SeededLab } from './labs';
import {
  largeFractions,
  largeInjections,
  largeLabel,
  largeLevelLabel,
  largeLevelsNgPerMl,
  largeLibrary,
  largePortions,
  largeSpikeNg,
  largeStandardNg,
  largeStandardNgPerMl,
  largeStandards,
  largeSubstances,
  largeTargets
} from './large-study';
import { idOf, type PanelIds } from './panel-ids';
import { workingCriteriaId } from './study';
import { upload } from './upload';
import { writeWorkbook } from './workbooks';

export const largeStudyCode = 'SIZE-150';
export const largeSeed = 15_060;

const fractionKinds = ['elution', 'second elution', 'second cartridge', 'load effluent'] as const;

/** Tells all entries at once what they are read against: one by one would be 150 saves. */
async function assignMarkers(chemist: Actor, ids: PanelIds): Promise<void> {
  const { id: studyId } = await getStudy(chemist, largeStudyCode);
  await inTransaction(chemist, { study: studyId }, async () => {
    for (const standard of largeStandards) {
      const readAgainst = largeSubstances.filter(({ internalStandard }) => internalStandard === standard);
      await PanelEntry.update(
        { internalStandardEntryId: idOf(ids, standard) },
        { where: { labId: chemist.labId, studyId, id: readAgainst.map(({ name }) => idOf(ids, name)) } }
      );
    }
    audit({
      action: 'changed',
      entity: 'panel',
      studyId,
      sentence: `${largeSubstances.length} analytes on the panel: read against ${largeStandards.join(' or ')}.`
    });
  });
}

async function createLargePanel(chemist: Actor): Promise<PanelIds> {
  await addToLibrary(chemist, largeLibrary);
  await createStudy(chemist, {
    code: largeStudyCode,
    title: 'Many invented substances at once',
    matrix: 'river-intake water',
    objective:
      'For trying the program at size: 150 invented substances in 60 injections. Nothing here means anything.',
    sampleVolumeMl: 500,
    criteriaSetId: await workingCriteriaId(chemist),
    panelText: largeTargets.join('\n'),
    panelRole: 'target'
  });
  await pastePanel(chemist, largeStudyCode, {
    text: largeStandards.join('\n'),
    role: 'injection internal standard'
  });
  const panel = await getPanel(chemist, largeStudyCode);
  const ids: PanelIds = new Map(panel.map((entry) => [entry.analyte.name, entry.id]));
  await assignMarkers(chemist, ids);
  return ids;
}

/** The study for trying things at size. */
export async function seedLargeStudy(lab: SeededLab): Promise<void> {
  const [chemist, analyst] = [lab.as('chemist'), lab.as('analyst')];
  const ids = await createLargePanel(chemist);
  await createVariant(chemist, largeStudyCode, { code: 'A', name: 'The only variant', description: '' });
  const calibrationSetId = await createCalibrationSet(chemist, largeStudyCode, {
    name: 'Calibration',
    instrument: 'Instrument',
    calibratedOn: '2026-11-02',
    defaultModel: 'linear',
    defaultWeighting: '1/x',
    levels: largeLevelsNgPerMl.map((concentrationNgPerMl, level) => ({
      label: largeLevelLabel(level),
      concentrationNgPerMl
    })),
    factors: {},
    constants: Object.fromEntries(largeStandards.map((name) => [idOf(ids, name), largeStandardNgPerMl])),
    concentrations: {}
  });
  const experimentNumber = await createExperiment(chemist, largeStudyCode, {
    stageKey: 'extraction',
    title: 'All substances in intake water',
    medium: 'sample matrix',
    matrix: 'river-intake water',
    levelLabel: `${largeSpikeNg} ng`,
    subtract: 'native',
    performedOn: '2026-11-03',
    analystId: analyst.userId,
    calibrationSetId,
    sampleVolumeMl: 500,
    finalVolumeMl: null,
    spikes: [
      {
        kind: 'spiked',
        targetsNg: largeSpikeNg,
        surrogatesNg: null,
        extractionStandardsNg: null,
        entries: {}
      }
    ],
    additions: largeStandards.map((name) => ({
      panelEntryId: idOf(ids, name),
      point: 'extract',
      amountNg: largeStandardNg,
      concentrationNgPerMl: null
    })),
    fractions: largeFractions.map((name, index) => ({
      id: null,
      name,
      kind: fractionKinds[index] ?? 'other',
      countsAs: name === 'Load effluent' ? 'balance' : 'method',
      passedStages: []
    })),
    replicates: (['spiked', 'unspiked', 'method blank'] as const).map((kind) => ({
      kind,
      count: largePortions[kind],
      batch: '',
      sampleVolumeMl: 500,
      labels: Array.from({ length: largePortions[kind] }, (_, index) => largeLabel(kind, index + 1)).join(
        '\n'
      )
    })),
    variantCode: 'A'
  });
  await upload(analyst, largeStudyCode, {
    fileName: 'large-run.xlsx',
    bytes: await writeWorkbook('Invented demo data', 'long', largeInjections(largeSeed), largeSubstances),
    experimentNumber
  });
}
