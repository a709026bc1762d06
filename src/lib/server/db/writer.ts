/** In whose name something is written. `Actor` is one; a job of the program itself has no user id. */
export interface Writer {
  readonly labId: string;
  readonly userId: string | null;
  readonly name: string;
  /** The access key that writes in the person's name. */
  readonly accessKey?: string;
}
