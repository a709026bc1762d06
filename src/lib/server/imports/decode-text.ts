import { hasByteOrderMark, looksLikeUtf16 } from './recognise-file';
import { Refusal } from './refusal';

/**
 * Decodes a text table: by its byte order mark, else UTF-16 where every second byte is zero, else UTF-8 where that is valid,
 * else windows-1252, which holds latin1.
 *
 * @throws Refusal for UTF-16 that is broken
 */
export function decodeText(bytes: Buffer): { readonly text: string; readonly encoding: string } {
  const encoding = encodingOf(bytes);
  if (encoding !== 'utf-8') {
    try {
      return { text: new TextDecoder(encoding, { fatal: true }).decode(bytes), encoding };
    } catch {
      throw new Refusal(
        'damaged',
        'This text file says it is UTF-16, but is not. Save it again as UTF-8 and bring that.'
      );
    }
  }
  try {
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), encoding };
  } catch {
    return { text: new TextDecoder('windows-1252').decode(bytes), encoding: 'windows-1252' };
  }
}

function encodingOf(bytes: Buffer): 'utf-8' | 'utf-16le' | 'utf-16be' {
  if (hasByteOrderMark(bytes)) {
    if (bytes[0] === 0xff) return 'utf-16le';
    return bytes[0] === 0xfe ? 'utf-16be' : 'utf-8';
  }
  return looksLikeUtf16(bytes) ?? 'utf-8';
}
