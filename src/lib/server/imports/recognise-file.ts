import type { ReadingLimits } from './limits';
import { Refusal } from './refusal';
import type { FileKind } from './types';

const compoundFile = Buffer.from([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1]);
const zipEntry = Buffer.from([0x50, 0x4b, 0x03, 0x04]);
const zipWithoutEntries = Buffer.from([0x50, 0x4b, 0x05, 0x06]);
/** The stream that holds the real workbook in a file protected by a password (ECMA-376 agile or standard encryption). */
const encryptedPackage = Buffer.from('EncryptedPackage', 'utf16le');

/**
 * Tells from its first bytes what a file is.
 *
 * @throws Refusal for what is empty, too large, protected, of an older format, or no table at all
 */
export function recogniseFile(bytes: Buffer, limits: ReadingLimits): FileKind {
  if (bytes.length === 0)
    throw new Refusal('empty', 'This file is empty: it has no bytes in it. Nothing was stored.');
  if (bytes.length > limits.fileBytes) {
    const megabytes = Math.round(limits.fileBytes / 1024 / 1024);
    throw new Refusal(
      'too large',
      `This file is larger than ${megabytes} MB. Split it, one sequence per file.`
    );
  }
  if (bytes.subarray(0, 8).equals(compoundFile)) throw refuseCompoundFile(bytes);
  const start = bytes.subarray(0, 4);
  if (start.equals(zipEntry)) return 'xlsx';
  if (start.equals(zipWithoutEntries)) {
    throw new Refusal(
      'not a workbook',
      'This is an archive without anything in it, not a workbook. Nothing was stored.'
    );
  }
  refuseOtherContent(bytes);
  return 'csv';
}

function refuseCompoundFile(bytes: Buffer): Refusal {
  return bytes.includes(encryptedPackage)
    ? new Refusal(
        'protected',
        'This workbook is protected by a password and cannot be read. Save a copy without the password and bring that.'
      )
    : new Refusal(
        'older workbook',
        'This is a file of an older format (.xls, .doc or the like). Save it as .xlsx or .csv and bring that.'
      );
}

/** Text is what has no control characters but tab and line ends, or declares its encoding by a byte order mark. */
function refuseOtherContent(bytes: Buffer): void {
  const start = bytes.subarray(0, 4096);
  const head = start.toString('latin1').trimStart();
  if (/^%PDF-/.test(head))
    throw new Refusal('not a workbook', 'This is a PDF, not a workbook. Bring the table as .xlsx or .csv.');
  if (/^<(?:!doctype|html|\?xml|table)/i.test(head)) {
    throw new Refusal(
      'not a workbook',
      'This is a web page or an XML file, whatever its name ends in, not a workbook. Save the table as .xlsx or .csv.'
    );
  }
  if (hasByteOrderMark(start) || looksLikeUtf16(start)) return;
  if (start.some((byte) => byte < 0x20 && byte !== 0x09 && byte !== 0x0a && byte !== 0x0d && byte !== 0x0c)) {
    throw new Refusal(
      'not a workbook',
      'This is neither a workbook (.xlsx) nor a text table (.csv, .tsv). Nothing was stored.'
    );
  }
}

export function hasByteOrderMark(bytes: Buffer): boolean {
  const [first, second, third] = bytes;
  return (
    (first === 0xff && second === 0xfe) ||
    (first === 0xfe && second === 0xff) ||
    (first === 0xef && second === 0xbb && third === 0xbf)
  );
}

/** UTF-16 without a mark: in Western text every second byte is zero, always on the same side. */
export function looksLikeUtf16(bytes: Buffer): 'utf-16le' | 'utf-16be' | null {
  const pairs = Math.floor(Math.min(bytes.length, 4096) / 2);
  if (pairs < 2) return null;
  let highZero = 0;
  let lowZero = 0;
  for (let pair = 0; pair < pairs; pair++) {
    if (bytes[2 * pair] === 0) highZero++;
    if (bytes[2 * pair + 1] === 0) lowZero++;
  }
  if (lowZero > 0.7 * pairs && highZero === 0) return 'utf-16le';
  if (highZero > 0.7 * pairs && lowZero === 0) return 'utf-16be';
  return null;
}
