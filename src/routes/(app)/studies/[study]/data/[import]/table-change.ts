import type { z } from 'zod';
import { carriedNames, type Carried, type CarriedName } from '$lib/schemas/column-map';
import type { tableForm } from '$lib/schemas/import-mapping';
import { Invalid } from '$lib/server/errors';
import { parseAddress } from '$lib/server/imports/cell-address';
import type { MapChange } from '$lib/server/imports/change-map';

function carried(names: CarriedName, typed: string): Carried[] {
  if (typed === '') return [];
  if (typed === 'sheet name' || typed === 'block title') return [{ names, from: typed }];
  const place = parseAddress(typed);
  if (!place) {
    throw Invalid.at(names, `“${typed}” is no cell: write it as B2, or choose where the name stands.`, {
      found: typed,
      expected: 'a cell'
    });
  }
  return [{ names, from: 'title cell', ...place }];
}

/** The change of a table as its form says it; lines are counted from 1 there. @throws Invalid for a cell that is none */
export function tableChange(form: z.infer<typeof tableForm>): MapChange {
  const last = form.headerLine - 1;
  return {
    what: 'table',
    sheet: form.sheet,
    orientation: form.orientation,
    headerLines: form.twoLines && last > 0 ? [last - 1, last] : [last],
    blocks: form.blocks,
    carried: carriedNames.flatMap((names) => carried(names, form[names].trim()))
  };
}
