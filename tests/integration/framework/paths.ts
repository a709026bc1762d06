/** What `$app/paths` says: the application stands at the root of its host. */
export const base = '';
