import type { Archive } from './archive';
import type { ReadingLimits } from './limits';
import { scanXml } from './scan-xml';

/** Built-in formats that show a date or a time (ECMA-376 part 1, 18.8.30, with the East Asian ones). */
function isBuiltInDate(id: number): boolean {
  return (id >= 14 && id <= 22) || (id >= 27 && id <= 36) || (id >= 45 && id <= 47) || (id >= 50 && id <= 58);
}

/**
 * Whether a custom number format shows a date or a time: one of y, m, d, h, s outside quoted text, escaped characters
 * and brackets (elapsed time such as [h] counts).
 */
export function isDateFormat(code: string): boolean {
  const [positive = ''] = code.split(';');
  const bare = positive
    .replace(/"[^"]*"/g, '')
    .replace(/[\\_*]./g, '')
    .replace(/\[(h+|m+|s+)\]/gi, 'h')
    .replace(/\[[^\]]*\]/g, '')
    .replace(/general/gi, '');
  return /[ymdhs]/i.test(bare);
}

/** For each cell style of the styles part: whether it shows its number as a date. */
export async function readDateStyles(
  archive: Archive,
  part: string,
  limits: ReadingLimits
): Promise<readonly boolean[]> {
  const custom = new Map<number, boolean>();
  const styles: boolean[] = [];
  let inCellFormats = false;
  await scanXml(archive, part, limits, {
    open(name, attributes) {
      if (name === 'numFmt')
        custom.set(Number(attributes.numFmtId), isDateFormat(attributes.formatCode ?? ''));
      else if (name === 'cellXfs') inCellFormats = true;
      else if (name === 'xf' && inCellFormats) {
        const id = Number(attributes.numFmtId ?? 0);
        styles.push(custom.get(id) ?? isBuiltInDate(id));
      }
    },
    close(name) {
      if (name === 'cellXfs') inCellFormats = false;
    }
  });
  return styles;
}
