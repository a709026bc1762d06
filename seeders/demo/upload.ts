import type { Actor } from '../../src/lib/domain/actor';
import { storeImport } from '../../src/lib/server/services/import-storing';
import { receiveFile } from '../../src/lib/server/services/imports';

/** Brings a data file in as a person would: received, read, and stored without anything left to answer. */
export async function upload(
  actor: Actor,
  studyCode: string,
  file: Readonly<{ fileName: string; bytes: Buffer; experimentNumber: number | null }>
): Promise<void> {
  const { importId } = await receiveFile(actor, studyCode, file);
  await storeImport(actor, studyCode, importId, { questionsConfirmed: false, reason: '' });
}
