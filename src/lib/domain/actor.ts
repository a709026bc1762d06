import type { Role } from './roles';

/** Who acts: one person in one lab, with the role read for this request. */
export interface Actor {
  readonly userId: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
  readonly labId: string;
  readonly labName: string;
  /** The lab holds invented demo data, and every page and export says so. */
  readonly labIsDemo: boolean;
  /** The name of the access key that acts for the person; absent in a session. */
  readonly accessKey?: string;
}
