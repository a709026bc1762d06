import type { Actor } from '../../../src/lib/domain/actor';
import { importParameters } from '../../../src/lib/schemas/api/import-parameters';
import { bringFile } from '../../../src/lib/server/services/import-bringing';
import { createExperiment } from '../../../src/lib/server/services/experiments';
import { makeExperimentForm } from '../../factories/experiment-form';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStudy } from '../../factories/study';
import type { ServerAnswer, ServerRequest } from './storing-server';

/*
 * The process that is killed: the services of the server on a database of their own, one request after the other.
 */
async function prepare(samples: number, analytes: number): Promise<ServerAnswer> {
  const actor: Actor = await makeMember({ role: 'chemist' });
  const { study } = await makeStudy(actor);
  for (let index = 1; index <= analytes; index += 1)
    await makePanelEntry(study, { name: `Analyte ${index}` });
  const labels = Array.from({ length: samples }, (_, index) => `S${index + 1}`).join('\n');
  await createExperiment(
    actor,
    study.code,
    makeExperimentForm({
      replicates: [{ kind: 'spiked', count: samples, labels }],
      spikes: [{ kind: 'spiked', targetsNg: '50' }]
    })
  );
  return { kind: 'prepared', actor, study: study.code, labId: study.labId };
}

async function answer(request: ServerRequest): Promise<ServerAnswer> {
  if (request.kind === 'prepare') return prepare(request.samples, request.analytes);
  try {
    const brought = await bringFile(
      request.actor,
      request.study,
      { fileName: request.fileName, bytes: Buffer.from(request.text) },
      importParameters.parse({
        store: request.store ? 'true' : 'false',
        basis: 'ng',
        reason: 'killed before'
      })
    );
    return { kind: 'brought', outcome: brought.outcome, importId: brought.import.id };
  } catch (error) {
    return { kind: 'failed', message: error instanceof Error ? error.message : String(error) };
  }
}

process.on('message', (request: ServerRequest) => {
  void answer(request).then((given) => process.send?.(given));
});
process.on('disconnect', () => process.exit());
process.send?.({ kind: 'ready' } satisfies ServerAnswer);
