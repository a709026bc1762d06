import type { Actor } from '../../src/lib/domain/actor';
import { storeImport } from '../../src/lib/server/services/import-storing';
import { receiveFile } from '../../src/lib/server/services/imports';

/**
 * Brings a data file in as a person would: received, read, and stored without anything left to answer but results outside the
 * calibrated range, of which the demo holds some so that their flags can be seen.
 */
export async function upload(
  actor: Actor,
  studyCode: string,
  file: Readonly<{ fileName: string; bytes: Buffer; experimentNumber: number | null }>
): Promise<void> {
  const { importId } = await receiveFile(actor, studyCode, file);
  await storeImport(actor, studyCode, importId, {
    questionsConfirmed: (code) => code === 'outside calibration range',
    reason: ''
  });
}
