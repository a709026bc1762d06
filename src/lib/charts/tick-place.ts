/**
 * How a tick's text stands to its tick: centred, or kept inside at the ends of the axis, where a centred one would
 * hang over the edge of the page. Classes for an absolutely placed element.
 * @param at place of the tick, 0 to 100
 */
export function tickPlace(at: number): string {
  if (at > 97) return '-translate-x-full';
  return at < 1 ? '' : '-translate-x-1/2';
}
