import { inPieces, piece } from './child-messages';
import type { ChildMessage, ChildRequest } from './child-messages';
import { mapRecords } from './map-records';
import { withMends } from './mends';
import { readWorkbook } from './read-workbook';
import { Refusal } from './refusal';
import type { MappedImport } from './types';

/** The process that reads one file and ends. It knows no database and no secrets. */

function send(message: ChildMessage): Promise<void> {
  return new Promise((resolve, reject) => {
    process.send?.(message, undefined, {}, (error) => (error ? reject(error) : resolve()));
  });
}

async function answer({ bytes, limits, expectation, maps }: ChildRequest): Promise<void> {
  const read = await readWorkbook(Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength), limits);
  const workbook = withMends(read, maps.mends);
  for (const texts of inPieces(workbook.sheets[0]?.texts ?? [], piece.texts))
    await send({ type: 'texts', texts });
  for (const { texts: _, ...sheet } of workbook.sheets) await send({ type: 'sheet', sheet });
  const mapped = expectation ? mapRecords(workbook, expectation, maps) : null;
  for (const records of inPieces(mapped?.records ?? [], piece.records))
    await send({ type: 'records', records });
  for (const problems of inPieces(mapped?.problems ?? [], piece.problems))
    await send({ type: 'problems', problems });
  const { kind, encoding, separator } = workbook;
  await send({ type: 'done', kind, encoding, separator, mapped: mapped && withoutLists(mapped) });
}

/** Records and problems have gone before, in pieces. */
function withoutLists({
  records: _,
  problems: __,
  ...rest
}: MappedImport): Omit<MappedImport, 'records' | 'problems'> {
  return rest;
}

process.once('message', (request: ChildRequest) => {
  answer(request)
    .catch((error: unknown) =>
      error instanceof Refusal
        ? send({ type: 'refused', code: error.code, message: error.message })
        : send({ type: 'refused', code: 'failed', message: failure(error) })
    )
    .finally(() => process.disconnect());
});

/** The sentence stays free of the file's content, which an unforeseen error may quote. */
function failure(error: unknown): string {
  const kind = error instanceof Error ? error.name : 'error';
  return `Reading this file failed in a way that was not foreseen (${kind}). Nothing was stored; the file may be damaged.`;
}

void send({ type: 'ready' });
