import { setFlagsFromString } from 'node:v8';
import { runInNewContext } from 'node:vm';
import { createInflateRaw } from 'node:zlib';
import { SaxesParser } from 'saxes';
import yauzl from 'yauzl';
import { readInChild } from '../../src/lib/server/imports/read-in-child';
import { readWorkbook } from '../../src/lib/server/imports/read-workbook';
import { lyingSize, oneHugeCell, sharedStringFlood } from '../fixtures/workbooks/bombs';
import { streamed } from '../fixtures/workbooks/exceljs-files';
import { medianMs, mediansInTurn, type Benchmark } from './benchmark';

/** A table as instruments export it: eight columns, of which four are texts that repeat. */
function measurements(rows: number): Promise<Buffer> {
  let seed = 7;
  const random = (): number => (seed = (seed * 16_807) % 2_147_483_647) / 2_147_483_647;
  return streamed(
    {
      Areas: [
        ['Sample', 'Fraction', 'Analyte', 'Area', 'IS area', 'Final volume (mL)', 'Dilution', 'Injection'],
        ...Array.from({ length: rows }, (_, row) => [
          `S${row % 60}`,
          `Elution ${row % 5}`,
          `Analyte ${row % 150}`,
          random() * 1e6,
          random() * 1e5,
          0.5,
          1,
          '1'
        ])
      ]
    },
    { useSharedStrings: true }
  );
}

/** The floor: the sheet inflated by zlib and scanned by the SAX parser, with nothing done about what it finds. */
export async function inflateAndScan(bytes: Buffer): Promise<number> {
  const zip = await yauzl.fromBufferPromise(bytes, { lazyEntries: true });
  let events = 0;
  for await (const entry of zip.eachEntry()) {
    if (entry.fileName !== 'xl/worksheets/sheet1.xml') continue;
    const parser = new SaxesParser({ position: false });
    parser.on('opentag', () => void events++);
    parser.on('text', () => void events++);
    const packed = await zip.openReadStreamPromise(entry, { decodeFileData: false });
    const decoder = new TextDecoder();
    for await (const piece of packed.pipe(createInflateRaw({ chunkSize: 64 * 1024 }))) {
      parser.write(decoder.decode(piece as Buffer, { stream: true }));
    }
    parser.close();
  }
  return events;
}

/**
 * How far heap and buffers of this process rise while it reads, in MB, what waits to be collected included; looked at between
 * the pieces of the file. The resident size would not show it: earlier work has left room.
 */
async function peakGrowth(bytes: Buffer): Promise<number> {
  setFlagsFromString('--expose-gc');
  runInNewContext('gc')();
  const inUse = (): number => process.memoryUsage().heapUsed + process.memoryUsage().external;
  const before = inUse();
  let peak = before;
  const look = setInterval(() => (peak = Math.max(peak, inUse())), 20);
  const workbook = await readWorkbook(bytes);
  clearInterval(look);
  if (workbook.sheets.length === 0) throw new Error('nothing was read');
  return (peak - before) / 1e6;
}

function reading(rows: number, ratio: number, runs: number): Benchmark {
  return {
    name: `read a workbook of ${rows} rows × 8, guards included`,
    goal: { ratio, is: 'at most' },
    async run({ note }) {
      const bytes = await measurements(rows);
      const [floor = NaN, figure = NaN] = await mediansInTurn(
        [() => inflateAndScan(bytes), () => readWorkbook(bytes)],
        { runs }
      );
      note(
        `${rows} rows × 8: memory grew by ${(await peakGrowth(bytes)).toFixed(0)} MB at the most (goal: under 100)`
      );
      return { figure, floor, unit: 'ms' };
    }
  };
}

/** The goal is a second for each file, from the bytes to the sentence, with the start of the process in it. */
function refusal(name: string, make: () => Buffer): Benchmark {
  return {
    name: `refuse ${name}, in a process of its own`,
    goal: { ratio: 1, is: 'at most' },
    async run() {
      const bytes = make();
      const refuse = (): Promise<unknown> => readInChild(bytes).catch((reason: unknown) => reason);
      return { figure: await medianMs(refuse, { runs: 3, warmUps: 1 }), floor: 1000, unit: 'ms' };
    }
  };
}

/** How long this process is kept from answering, at worst, while a child reads for it. */
const answering: Benchmark = {
  name: 'longest wait of other work while 250000 rows are read',
  goal: { ratio: 1, is: 'at most' },
  async run() {
    const bytes = await measurements(250_000);
    let last = performance.now();
    let longest = 0;
    const beat = setInterval(() => {
      const now = performance.now();
      longest = Math.max(longest, now - last - 10);
      last = now;
    }, 10);
    try {
      await readInChild(bytes);
    } finally {
      clearInterval(beat);
    }
    return { figure: longest, floor: 150, unit: 'ms' };
  }
};

export const benchmarks: readonly Benchmark[] = [
  reading(9_000, 2.5, 11),
  reading(250_000, 2, 3),
  answering,
  refusal('a cell of 100 MB', oneHugeCell),
  refusal('5.9 million shared texts', sharedStringFlood),
  refusal('a part that lies about its size', lyingSize)
];
