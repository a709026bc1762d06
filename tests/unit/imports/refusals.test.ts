import { describe, expect, it } from 'vitest';
import { readingLimits } from '../../../src/lib/server/imports/limits';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import { Refusal } from '../../../src/lib/server/imports/refusal';
import * as bombs from '../../fixtures/workbooks/bombs';
import { handMadeWorkbook, withPart, workbookParts } from '../../fixtures/workbooks/hand-made';
import { zip } from '../../fixtures/workbooks/zip';

const plain = { sheets: [{ name: 'Areas', data: '<row r="1"><c r="A1"><v>1</v></c></row>' }] } as const;
const compoundSignature = Buffer.from('d0cf11e0a1b11ae1', 'hex');

async function refusal(bytes: Buffer): Promise<Refusal> {
  const error = await readWorkbook(bytes).then(
    () => null,
    (reason: unknown) => reason
  );
  expect(error).toBeInstanceOf(Refusal);
  return error as Refusal;
}

describe('readWorkbook refuses', () => {
  it.each<[string, () => Buffer, string]>([
    ['a cell of a hundred megabytes', bombs.oneHugeCell, 'out of proportion'],
    ['a cell longer than cells can be', bombs.oneLongCell, 'out of proportion'],
    ['millions of shared texts', bombs.sharedStringFlood, 'out of proportion'],
    ['a cell in the last corner of the grid', bombs.farCorner, 'out of proportion'],
    ['a part larger than it says', bombs.lyingSize, 'damaged'],
    ['elements nested without end', bombs.deepNest, 'out of proportion'],
    ['entities that multiply', bombs.multiplyingEntities, 'damaged'],
    ['a flood of repeated rows', bombs.rowFlood, 'out of proportion'],
    ['thousands of parts', bombs.manyParts, 'out of proportion'],
    ['one part read as hundreds of sheets', bombs.oneSheetManyTimes, 'damaged'],
    ['a quotation mark that never closes', bombs.openQuote, 'out of proportion'],
    ['a broken stream', bombs.brokenStream, 'damaged']
  ])('%s', async (_, make, code) => {
    const { code: found, message } = await refusal(make());
    expect(found).toBe(code);
    expect(message).toMatch(/^[A-Z].*\.$/);
  });

  it.each<[string, Buffer, string, RegExp]>([
    ['a file without bytes', Buffer.alloc(0), 'empty', /no bytes/],
    ['a file of blank lines', Buffer.from('\r\n \t\n\n'), 'empty', /blank/],
    [
      'a workbook without a filled cell',
      handMadeWorkbook({ sheets: [{ name: 'A', data: '' }] }),
      'empty',
      /none of its sheets/
    ],
    [
      'an encrypted workbook',
      Buffer.concat([compoundSignature, Buffer.alloc(1000), Buffer.from('EncryptedPackage', 'utf16le')]),
      'protected',
      /password/
    ],
    [
      'an older binary workbook',
      Buffer.concat([compoundSignature, Buffer.alloc(1000)]),
      'older workbook',
      /\.xls/
    ],
    [
      'an encrypted archive',
      withPart(plain, { name: 'xl/styles.xml', content: '<a/>', flags: 1 }),
      'protected',
      /password/
    ],
    ['a PDF', Buffer.from('%PDF-1.7\n...'), 'not a workbook', /PDF/],
    [
      'a web page under another name',
      Buffer.from('<html><table><tr><td>1</td></tr></table></html>'),
      'not a workbook',
      /web page/
    ],
    ['a picture', Buffer.from('89504e470d0a1a0a0000000d', 'hex'), 'not a workbook', /neither/],
    [
      'an archive of something else',
      zip([{ name: 'a.txt', content: 'a' }]),
      'not a workbook',
      /no workbook in it/
    ],
    ['an empty archive', zip([]), 'not a workbook', /archive/],
    [
      'an OpenDocument file',
      zip([
        { name: 'mimetype', content: 'application/vnd.oasis.opendocument.spreadsheet', stored: true },
        { name: 'content.xml', content: '<x/>' }
      ]),
      'other format',
      /OpenDocument/
    ],
    ['a workbook cut off in the middle', handMadeWorkbook(plain).subarray(0, 700), 'damaged', /cut off/],
    [
      'a part that fails its check sum',
      withPart(plain, { name: 'xl/worksheets/sheet1.xml', content: '<worksheet/>', claimedChecksum: 1 }),
      'damaged',
      /check sum/
    ],
    [
      'a sheet that is not XML',
      withPart(plain, { name: 'xl/worksheets/sheet1.xml', content: 'a < b' }),
      'damaged',
      /well-formed/
    ],
    [
      'a missing part',
      zip(workbookParts(plain).filter(({ name }) => name !== 'xl/worksheets/sheet1.xml')),
      'damaged',
      /missing/
    ],
    [
      'a shared text that is not there',
      handMadeWorkbook({
        sheets: [{ name: 'A', data: '<row r="1"><c r="A1" t="s"><v>4</v></c></row>' }],
        sharedStrings: ['<t>a</t>']
      }),
      'damaged',
      /does not hold/
    ],
    [
      'one cell given twice',
      handMadeWorkbook({
        sheets: [{ name: 'A', data: '<row r="1"><c r="A1"><v>1</v></c><c r="A1"><v>2</v></c></row>' }]
      }),
      'damaged',
      /A1 twice/
    ],
    [
      'broken UTF-16',
      Buffer.concat([Buffer.from([0xff, 0xfe]), Buffer.from('a', 'utf16le'), Buffer.from([0x00, 0xd8])]),
      'damaged',
      /UTF-16/
    ]
  ])('%s, and says why', async (_, bytes, code, words) => {
    const { code: found, message } = await refusal(bytes);
    expect(found).toBe(code);
    expect(message).toMatch(words);
  });

  it('a file above the size limit', async () => {
    const error = await readWorkbook(Buffer.from('Sample;Area\n'), { ...readingLimits, fileBytes: 5 }).catch(
      (reason: unknown) => reason
    );
    expect(error).toMatchObject({ code: 'too large' });
  });

  it('a binary workbook', async () => {
    const parts = workbookParts(plain).map((part) =>
      part.name === '_rels/.rels'
        ? { ...part, content: String(part.content).replace('workbook.xml', 'workbook.bin') }
        : part
    );
    expect(await refusal(zip(parts))).toMatchObject({ code: 'other format' });
  });

  it('keeps its bombs small, so that they are what they are called', () => {
    expect(bombs.oneHugeCell().length).toBeLessThan(200_000);
    expect(bombs.sharedStringFlood().length).toBeLessThan(400_000);
  });
});
