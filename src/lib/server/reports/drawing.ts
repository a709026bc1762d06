import { tokens } from '../../domain/theme-tokens';

const values: Readonly<Record<string, readonly [light: string, dark: string]>> = tokens;

/**
 * A rendered drawing as a file of its own: colour tokens become the values of the light theme, and what only a page needs
 * goes.
 * @throws RangeError for a token that does not exist
 */
export function svgFile(rendered: string): string {
  const body = rendered.replace(/<!--.*?-->/gs, '').trim();
  const resolved = body.replace(/var\(--([a-z0-9-]+)\)/g, (_all, name: string) => {
    const value = values[name];
    if (!value) throw new RangeError(`The drawing uses the colour ${name}, which is no token.`);
    return value[0];
  });
  return `<?xml version="1.0" encoding="UTF-8"?>\n${resolved}\n`;
}
