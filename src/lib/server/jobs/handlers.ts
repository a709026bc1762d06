import { passwordResetJob, sendMailJob } from '../mail/mail-jobs';
import { sendMail } from '../mail/send-mail';
import { issuePasswordReset } from '../services/passwords';
import { handle, type JobHandler } from './job';

/** Who does what in the worker: one handler for each job in definitions.ts, made with `handle(job, run)`. */
export const handlers: readonly JobHandler[] = [
  handle(sendMailJob, ({ messageId }) => sendMail(messageId)),
  handle(passwordResetJob, (asked, { id }) => issuePasswordReset({ id, ...asked }))
];
