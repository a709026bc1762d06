import { readingLimits } from './limits';
import type { ReadingLimits } from './limits';
import { readCsv } from './read-csv';
import { readXlsx } from './read-xlsx';
import { recogniseFile } from './recognise-file';
import type { Workbook } from './types';

/**
 * Reads an uploaded file, whatever its name says it is. Untrusted bytes go through `readInChild`, which can be ended;
 * this is what runs inside it.
 *
 * @throws Refusal with a plain sentence for what cannot be read
 */
export async function readWorkbook(bytes: Buffer, limits: ReadingLimits = readingLimits): Promise<Workbook> {
  return recogniseFile(bytes, limits) === 'xlsx' ? readXlsx(bytes, limits) : readCsv(bytes, limits);
}
