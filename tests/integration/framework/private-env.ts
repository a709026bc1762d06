/** What `$env/dynamic/private` says. */
export const env = process.env;
