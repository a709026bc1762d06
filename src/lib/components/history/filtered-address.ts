/** The address of the same page with some parameters changed; null takes one away. */
export function filteredAddress(
  parameters: URLSearchParams,
  changes: Readonly<Record<string, string | null>>
): string {
  const kept = [...parameters].filter(([name]) => !(name in changes));
  const set = Object.entries(changes).filter((entry): entry is [string, string] => entry[1] !== null);
  return `?${new URLSearchParams([...kept, ...set])}`;
}
