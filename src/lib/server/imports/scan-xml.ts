import { SaxesParser } from 'saxes';
import type { Archive } from './archive';
import type { ReadingLimits } from './limits';
import { damaged, outOfProportion, Refusal } from './refusal';

export interface XmlHandlers {
  /** Names come without their prefix. */
  readonly open?: (name: string, attributes: Readonly<Record<string, string>>) => void;
  readonly close?: (name: string) => void;
  readonly text?: (text: string) => void;
}

const lessThan = 0x3c;

/**
 * Streams one part of the archive through the handlers.
 *
 * Workbook parts declare no document type, so none is taken (it is where entities that multiply come from), and
 * between one tag and the next there is one cell's text at most.
 *
 * @throws Refusal
 */
export async function scanXml(
  archive: Archive,
  part: string,
  limits: ReadingLimits,
  { open, close, text }: XmlHandlers
): Promise<void> {
  const parser = new SaxesParser({ xmlns: false, position: false, fragment: false });
  let depth = 0;
  let decoder: TextDecoder | null = null;
  let sinceTag = 0;

  parser.on('doctype', () => {
    throw damaged(`its part ${part} declares a document type, which workbooks never do`);
  });
  parser.on('error', () => {
    throw damaged(`its part ${part} is not well-formed`);
  });
  parser.on('opentag', (tag) => {
    depth++;
    if (depth > limits.depth)
      throw outOfProportion('This workbook nests its elements deeper than any workbook does.');
    open?.(localName(tag.name), tag.attributes);
  });
  parser.on('closetag', (tag) => {
    depth--;
    close?.(localName(tag.name));
  });
  if (text) parser.on('text', text);

  function refuseLongToken(piece: Buffer): void {
    const last = piece.lastIndexOf(lessThan);
    if (last < 0) sinceTag += piece.length;
    else if (sinceTag + piece.indexOf(lessThan) > limits.tokenBytes) sinceTag = Infinity;
    else sinceTag = piece.length - last;
    if (sinceTag > limits.tokenBytes) {
      throw outOfProportion(
        `One cell of this workbook holds more than ${Math.round(limits.tokenBytes / 1024)} kB of text.`
      );
    }
  }

  await archive.inflate(part, (piece) => {
    refuseLongToken(piece);
    decoder ??= decoderFor(piece);
    try {
      parser.write(decoder.decode(piece, { stream: true }));
    } catch (error) {
      if (error instanceof Refusal) throw error;
      throw damaged(`its part ${part} is not text`);
    }
  });
  parser.close();
}

function localName(name: string): string {
  const colon = name.indexOf(':');
  return colon < 0 ? name : name.slice(colon + 1);
}

function decoderFor(start: Buffer): TextDecoder {
  if (start[0] === 0xff && start[1] === 0xfe) return new TextDecoder('utf-16le', { fatal: true });
  if (start[0] === 0xfe && start[1] === 0xff) return new TextDecoder('utf-16be', { fatal: true });
  return new TextDecoder('utf-8', { fatal: true });
}
