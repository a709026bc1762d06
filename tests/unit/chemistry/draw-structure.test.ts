import { expect, test } from 'vitest';
import { drawStructure } from '../../../src/lib/server/chemistry/index';
import { structures } from '../../reference/data/structures';

/** The elements and attributes of a piece of SVG, each once. */
function parts(svg: string) {
  const elements = [...svg.matchAll(/<(\w+)/g)].map(([, name]) => name);
  const attributes = [...svg.matchAll(/\s([\w:-]+)="/g)].map(([, name]) => name);
  return { elements: [...new Set(elements)].sort(), attributes: [...new Set(attributes)].sort() };
}

test('every structure is drawn from shapes and numbers alone, in the colour of the text', async () => {
  const drawn = await Promise.all(
    structures.map(({ name, smiles }) => drawStructure(smiles, { title: name }))
  );
  const all = parts(drawn.join(''));
  expect(all.elements.filter((e) => !['svg', 'title', 'g', 'line', 'text', 'polygon'].includes(e!))).toEqual(
    []
  );
  expect(all.attributes).not.toContain('id');
  expect(all.attributes).not.toContain('class');
  expect(all.attributes).not.toContain('style');
  expect(all.attributes.filter((a) => a!.startsWith('on') || a!.includes('href'))).toEqual([]);
  for (const svg of drawn) {
    const colours = [...svg.matchAll(/(?:fill|stroke)="([^"]*)"/g)].map(([, colour]) => colour);
    expect(new Set(colours)).toEqual(new Set(['currentColor']));
    expect(svg).toMatch(/^<svg [^>]*role="img"/);
  }
});

test('a drawing has a line for every bond at least, and a letter for every atom but carbon', async () => {
  // Aniline: 6 ring bonds and one to nitrogen, three of them double; N, H and the 2 of NH2.
  const svg = await drawStructure('Nc1ccccc1', { title: 'Aniline' });
  expect(svg.match(/<line/g)).toHaveLength(10);
  expect([...svg.matchAll(/<text[^>]*>([^<]*)/g)].map(([, text]) => text).sort()).toEqual(['2', 'H', 'N']);
});

test('wedges stay', async () => {
  expect(await drawStructure('C[C@](F)(Cl)Br', { title: 'x' })).toContain('<polygon');
});

test('the name is the name of the drawing, whatever signs it holds', async () => {
  const svg = await drawStructure('C', { title: `<b>"it's" & more</b>` });
  expect(svg).toContain('aria-label="&#60;b&#62;&#34;it&#39;s&#34; &#38; more&#60;/b&#62;"');
  expect(svg).not.toContain('<b>');
});

test('sizes and structures that cannot be drawn are refused', async () => {
  for (const width of [0, 19, 2001, NaN, Infinity]) {
    await expect(drawStructure('C', { title: 'x', width })).rejects.toThrow('The width must');
    await expect(drawStructure('C', { title: 'x', height: width })).rejects.toThrow('The height must');
  }
  await expect(drawStructure('C1', { title: 'x' })).rejects.toThrow("'C1' cannot be read as SMILES");
});
