/** The parameter of a page that names the figure whose provenance is open beside it. */
export const figureParameter = 'figure';

/** How the page at an address links to figures, and to itself with none open. Relative, all other parameters kept. */
export interface FigureLinks {
  readonly figureLink: (address: string) => string;
  readonly closeHref: string;
  /** The address of the open figure; null: none. */
  readonly open: string | null;
}

export function figureLinks(url: URL): FigureLinks {
  const others = new URLSearchParams(url.searchParams);
  others.delete(figureParameter);
  const kept = others.toString();
  return {
    // Colons read better than their escapes, and a query may hold them.
    figureLink: (address) =>
      `?${kept === '' ? '' : `${kept}&`}${figureParameter}=${encodeURIComponent(address).replaceAll('%3A', ':')}`,
    closeHref: kept === '' ? url.pathname : `?${kept}`,
    open: url.searchParams.get(figureParameter)
  };
}
