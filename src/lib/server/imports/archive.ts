import { createInflateRaw, crc32 } from 'node:zlib';
import type { Readable } from 'node:stream';
import yauzl from 'yauzl';
import type { ReadingLimits } from './limits';
import { damaged, outOfProportion, Refusal } from './refusal';

const stored = 0;
const deflated = 8;

/** The parts of a workbook's zip archive, inflated one at a time and never trusted about their size. */
export interface Archive {
  readonly names: readonly string[];
  has(name: string): boolean;
  /**
   * Hands the bytes of one part to `take`, piece by piece.
   *
   * @throws Refusal when the part is missing, damaged, or inflates to more than declared or allowed
   */
  inflate(name: string, take: (piece: Buffer) => void): Promise<void>;
}

/**
 * Opens the archive and checks what its directory declares, before anything is inflated.
 *
 * @throws Refusal
 */
export async function openArchive(bytes: Buffer, limits: ReadingLimits): Promise<Archive> {
  const zip = await open(bytes);
  const entries = await readDirectory(zip, limits);
  let inflatedBytes = 0;

  async function inflate(name: string, take: (piece: Buffer) => void): Promise<void> {
    const entry = entries.get(key(name));
    if (!entry) throw damaged(`its part ${name} is missing`);
    let size = 0;
    let checksum = 0;
    try {
      for await (const piece of await openPart(zip, entry)) {
        const buffer = piece as Buffer;
        size += buffer.length;
        inflatedBytes += buffer.length;
        if (size > entry.uncompressedSize) throw damaged(`its part ${name} is larger than it says`);
        refuseDisproportion(size, entry.compressedSize, inflatedBytes, limits);
        checksum = crc32(buffer, checksum);
        take(buffer);
      }
    } catch (error) {
      if (error instanceof Refusal) throw error;
      throw damaged(`its part ${name} cannot be unpacked`);
    }
    if (size !== entry.uncompressedSize || checksum !== entry.crc32) {
      throw damaged(`its part ${name} does not match its check sum`);
    }
  }

  return {
    names: [...entries.values()].map((entry) => entry.fileName),
    has: (name) => entries.has(key(name)),
    inflate
  };
}

/** Part names are compared without case and percent signs (ECMA-376 part 2). */
function key(name: string): string {
  const plain = name.replace(/^\/+/, '').toLowerCase();
  try {
    return decodeURI(plain);
  } catch {
    return plain;
  }
}

function open(bytes: Buffer): Promise<yauzl.ZipFile> {
  return new Promise((resolve, reject) => {
    yauzl.fromBuffer(
      bytes,
      { lazyEntries: true, decodeStrings: true, validateEntrySizes: true },
      (error, zip) => {
        if (error)
          reject(damaged('its archive has no readable directory, perhaps because it was cut off on the way'));
        else resolve(zip);
      }
    );
  });
}

function readDirectory(zip: yauzl.ZipFile, limits: ReadingLimits): Promise<ReadonlyMap<string, yauzl.Entry>> {
  return new Promise((resolve, reject) => {
    if (zip.entryCount > limits.entries) {
      reject(outOfProportion(`This archive holds ${zip.entryCount} files; a workbook has some dozens.`));
      return;
    }
    const entries = new Map<string, yauzl.Entry>();
    let declared = 0;
    zip.on('error', () => reject(damaged('the directory of its archive is not readable')));
    zip.on('end', () => resolve(entries));
    zip.on('entry', (entry: yauzl.Entry) => {
      try {
        declared += entry.uncompressedSize;
        refuseEntry(entry, declared, limits);
        if (entries.has(key(entry.fileName))) throw damaged(`its part ${entry.fileName} is there twice`);
        entries.set(key(entry.fileName), entry);
        zip.readEntry();
      } catch (error) {
        reject(error);
      }
    });
    zip.readEntry();
  });
}

function refuseEntry(entry: yauzl.Entry, declaredSoFar: number, limits: ReadingLimits): void {
  if (entry.isEncrypted()) {
    throw new Refusal(
      'protected',
      'This archive is protected by a password. Save a copy without it and bring that.'
    );
  }
  if (entry.compressionMethod !== stored && entry.compressionMethod !== deflated) {
    throw damaged(`its part ${entry.fileName} is packed in a way that workbooks do not use`);
  }
  refuseDisproportion(entry.uncompressedSize, entry.compressedSize, declaredSoFar, limits);
}

function refuseDisproportion(size: number, packed: number, total: number, limits: ReadingLimits): void {
  if (total > limits.inflatedBytes) {
    const megabytes = Math.round(limits.inflatedBytes / 1024 / 1024);
    throw outOfProportion(`Unpacked, this workbook holds more than ${megabytes} MB.`);
  }
  if (size > limits.ratioFromBytes && size > packed * limits.ratio) {
    throw outOfProportion(
      `This workbook unpacks to more than ${limits.ratio} times its size, which tables of measurements do not do.`
    );
  }
}

async function openPart(zip: yauzl.ZipFile, entry: yauzl.Entry): Promise<Readable> {
  const packed = await zip.openReadStreamPromise(entry, { decodeFileData: false });
  if (entry.compressionMethod === stored) return packed;
  const inflating = createInflateRaw({ chunkSize: 64 * 1024 });
  packed.on('error', (error) => inflating.destroy(error));
  return packed.pipe(inflating);
}
