/** Links of API answers lead from a figure to its provenance within the API. */
export function apiFigureLink(study: string): (address: string) => string {
  return (address) =>
    `/api/v1/studies/${encodeURIComponent(study)}/provenance?figure=${encodeURIComponent(address)}`;
}
