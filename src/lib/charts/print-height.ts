/** Rows of a chart that a printed page (A4) holds beside title and legend. */
const rowsOnPage = 40;

/** True for a chart that would be cut by the edge of a printed page. */
export const isTall = (rows: number): boolean => rows > rowsOnPage;
