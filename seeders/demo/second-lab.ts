import { pastePanel } from '../../src/lib/server/services/panels';
import { createStudy } from '../../src/lib/server/services/studies';
import type { SeededLab } from './labs';
import { workingCriteriaId } from './study';

export const secondStudyCode = 'BAY-1';

/** A study that has only been begun, in a lab of its own: nobody of the first lab sees it, nor it the first lab's. */
export async function seedSecondLab(lab: SeededLab): Promise<void> {
  const manager = lab.as('manager');
  await createStudy(manager, {
    code: secondStudyCode,
    title: 'Herbicides in bay water',
    matrix: 'sea water',
    objective: 'Invented study with invented data, only begun.',
    sampleVolumeMl: 1000,
    criteriaSetId: await workingCriteriaId(manager),
    panelText: ['Atrazine', 'Diuron', 'Mecoprop'].join('\n'),
    panelRole: 'target'
  });
  await pastePanel(manager, secondStudyCode, { text: 'Atrazine-d5', role: 'surrogate' });
}
