type Node = { [key: string]: Node | Leaf };
type Leaf = string | File | (string | File)[];

const isNode = (value: unknown): value is Node =>
  typeof value === 'object' && value !== null && !Array.isArray(value) && !(value instanceof File);

/** Objects whose keys are all whole numbers become lists in their order. */
function lists(node: Node): unknown {
  const entries = Object.entries(node).map(
    ([key, value]) => [key, isNode(value) ? lists(value) : value] as const
  );
  const numbered = entries.length > 0 && entries.every(([key]) => /^\d+$/.test(key));
  if (!numbered) return Object.fromEntries(entries);
  return entries.sort(([a], [b]) => Number(a) - Number(b)).map(([, value]) => value);
}

/**
 * The fields of a form as one object: `fractions.0.name` becomes `{ fractions: [{ name }] }`, and a name that was sent several
 * times a list. Names that could reach into the object's prototype are left out.
 */
export function formObject(data: FormData): Record<string, unknown> {
  const root: Node = Object.create(null) as Node;
  for (const name of new Set(data.keys())) {
    const path = name.split('.');
    if (
      path.some(
        (part) => part === '' || part === '__proto__' || part === 'constructor' || part === 'prototype'
      )
    )
      continue;
    const values = data.getAll(name);
    let node = root;
    for (const part of path.slice(0, -1)) {
      const next = node[part];
      node = isNode(next) ? next : ((node[part] = Object.create(null) as Node) as Node);
    }
    node[path.at(-1) ?? name] = values.length === 1 ? (values[0] as Leaf) : values;
  }
  return lists(root) as Record<string, unknown>;
}
