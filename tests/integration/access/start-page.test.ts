import { describe, expect, it } from 'vitest';
import { startPage } from '../../../src/lib/server/services/start-page';
import { makeExperiment } from '../../factories/experiment';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStoredImport } from '../../factories/stored-import';
import { makeStudy, setStudyState } from '../../factories/study';

describe('the start page', () => {
  it('shows the analyst which experiments wait for data: of open studies, with preparations, without values', async () => {
    const lab = await makeLab();
    const analyst = await makeMember({ lab, role: 'analyst' });
    const made = await makeStudy(analyst, { code: 'WAIT-1', title: 'A study that waits' });
    const entry = await makePanelEntry(made.study);
    const waiting = await makeExperiment(made, {
      title: 'Waits',
      fractions: [
        { name: 'Elution' },
        { name: 'Second cartridge', kind: 'second cartridge', countsAs: 'balance' }
      ]
    });
    await makeExperiment(made, { title: 'Has no preparations', replicates: {} });
    const measured = await makeExperiment(made, { title: 'Has values' });
    await makeStoredImport(analyst, made.study, [
      {
        experimentId: measured.experiment.id,
        replicateId: measured.replicates[0]!.id,
        fractionId: measured.fractions[0]!.id,
        analyteId: entry.analyteId,
        reported: 1000
      }
    ]);
    const frozen = await makeStudy(analyst, { code: 'FROZEN-1' });
    await makeExperiment(frozen, { title: 'In a study under review' });
    await setStudyState(frozen.study.id, 'in review');
    const foreign = await makeMember({ role: 'chemist' });
    await makeExperiment(await makeStudy(foreign), { title: 'In another lab' });

    const view = await startPage(analyst);
    expect(view.waiting).toEqual([
      {
        study: 'WAIT-1',
        studyTitle: 'A study that waits',
        number: waiting.experiment.number,
        title: 'Waits',
        stage: 'Extraction',
        replicates: 3,
        fractions: 2,
        performedOn: null
      }
    ]);
    expect(view.studies.map(({ code }) => code).sort()).toEqual(['FROZEN-1', 'WAIT-1']);
  });

  it('tells the manager and the reviewer whose move each study is', async () => {
    const lab = await makeLab();
    const chemist = await makeMember({ lab, role: 'chemist', name: 'Ines Rill' });
    const { study } = await makeStudy(chemist, { code: 'MOVE-1' });
    const manager = await makeMember({ lab, role: 'manager' });
    expect((await startPage(manager)).studies).toMatchObject([
      { code: 'MOVE-1', waitsFor: 'Ines Rill', finding: null }
    ]);
    await setStudyState(study.id, 'in review');
    const reviewer = await makeMember({ lab, role: 'reviewer' });
    const view = await startPage(reviewer);
    expect(view.studies).toMatchObject([{ code: 'MOVE-1', waitsFor: 'a reviewer', daysWaiting: 0 }]);
    expect(view.waiting).toEqual([]);
  });

  it('is empty for a lab without studies', async () => {
    expect(await startPage(await makeMember({ role: 'chemist' }))).toEqual({ studies: [], waiting: [] });
  });
});
