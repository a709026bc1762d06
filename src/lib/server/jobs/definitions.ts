import { passwordResetJob, sendMailJob } from '../mail/mail-jobs';
import type { AnyJob } from './job';

/** Every job of the program. Its handler stands in handlers.ts. */
export const jobs: readonly AnyJob[] = [sendMailJob, passwordResetJob];
