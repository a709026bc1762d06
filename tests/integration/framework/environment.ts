/** What `$app/environment` says while the server serves: Auth.js asks for it. */
export const building = false;
export const dev = false;
export const browser = false;
