import { ChemistryError } from './errors';
import { within } from './guards';
import { loadLibrary, openMolecule } from './open-molecule';

export interface StructureDrawing {
  /** Longest edges in px; the drawing is cropped to the molecule. */
  readonly width?: number;
  readonly height?: number;
  /** What it shows, for those who do not see it; the name of the substance. */
  readonly title: string;
}

/** Marks of stereo problems, symmetry and colours are for editors, not for a page. */
const plainly = {
  autoCrop: true,
  suppressChiralText: true,
  suppressESR: true,
  suppressCIPParity: true,
  noImplicitAtomLabelColors: true,
  noStereoProblem: true,
  noColorOnESRAndCIP: true
} as const;

/** What may stand in the drawing, with the attributes that carry its geometry. */
const shapes: Readonly<Record<string, readonly string[]>> = {
  line: ['x1', 'y1', 'x2', 'y2', 'stroke-width'],
  polygon: ['points'],
  circle: ['cx', 'cy', 'r'],
  text: ['x', 'y', 'font-size']
};
const geometry = /^[-\d.,\s]+$/;

/**
 * The structure of a SMILES as a piece of SVG for a page: transparent, drawn in the current text colour, so that it works in both
 * themes; no ids, styles, links or scripts. Every shape is taken over by name and its numbers are checked.
 * @returns the text of one `svg` element with role img and the title as its name
 * @throws ChemistryError `unreadable-structure` as `readStructure`, `out-of-range` for a size that is not 20 to 2000 px
 */
export async function drawStructure(smiles: string, drawing: StructureDrawing): Promise<string> {
  const width = within(drawing.width ?? 240, 'The width', 20, 2000);
  const height = within(drawing.height ?? 180, 'The height', 20, 2000);
  const library = await loadLibrary();
  const drawn = openMolecule(library, smiles, 'whole').toSVG(width, height, undefined, plainly);
  const view = /<svg[^>]*\sviewBox="([-\d.\s]+)"/.exec(drawn)?.[1]?.trim();
  const [, , viewWidth, viewHeight] = view?.split(/\s+/) ?? [];
  if (view === undefined || viewWidth === undefined || viewHeight === undefined) {
    throw new ChemistryError('unreadable-structure', 'The structure gave a drawing without a frame.');
  }
  const name = escaped(drawing.title);
  return (
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="${view}" width="${viewWidth}" height="${viewHeight}" role="img" aria-label="${name}">` +
    `<title>${name}</title>` +
    `<g stroke-linecap="round" stroke-linejoin="round" font-family="inherit">${shapesOf(drawn).join('')}</g></svg>`
  );
}

/** The visible shapes, rewritten. The library adds invisible ones as targets of the pointer. */
function shapesOf(drawn: string): readonly string[] {
  return [...drawn.matchAll(/<(\w+)((?:\s[\w-]+="[^"]*")*)\s*\/?>([^<]*)/g)].flatMap((match) => {
    const [, element = '', attributeText = '', content = ''] = match;
    if (element === 'svg' || element === 'style') return [];
    const attributes = new Map(
      [...attributeText.matchAll(/([\w-]+)="([^"]*)"/g)].map(([, key, value]) => [key, value])
    );
    if (attributes.get('opacity') === '0') return [];
    const kept = (shapes[element] ?? unknown(`a shape '${element}'`)).map((key) => {
      const value = attributes.get(key) ?? '';
      return geometry.test(value) ? ` ${key}="${value}"` : unknown(`${element} ${key} '${value}'`);
    });
    if (element === 'line') return [`<line stroke="currentColor"${kept.join('')}/>`];
    if (element !== 'text') return [`<${element} fill="currentColor"${kept.join('')}/>`];
    return [`<text fill="currentColor"${kept.join('')}>${escaped(content)}</text>`];
  });
}

/** A drawing that lacks a part would be another structure. */
function unknown(what: string): never {
  throw new ChemistryError('unreadable-structure', `The drawing holds ${what}, which is not known here.`);
}

function escaped(text: string): string {
  return text.replace(/[&<>"']/g, (sign) => `&#${sign.charCodeAt(0)};`);
}
