/** The page's address with one thing opened on it, or closed again where `value` is null. */
export function withQuery(url: URL, name: string, value: string | null, hash: string): string {
  const query = new URLSearchParams(url.searchParams);
  if (value === null) query.delete(name);
  else query.set(name, value);
  return `${url.pathname}?${query.toString()}#${hash}`;
}
