import { z } from 'zod';
import { defineJob } from '../jobs/job';

/** Sends one message of the outbox. */
export const sendMailJob = defineJob('mail.send', z.object({ messageId: z.uuid() }), {
  retries: 8,
  expiresAfterSeconds: 120
});

/**
 * Looks up who asked for a new password and writes to them. Done later, so that the answer at the page
 * takes equally long whether the address has an account or not.
 */
export const passwordResetJob = defineJob(
  'password-reset.issue',
  z.object({ email: z.string(), origin: z.url() }),
  {
    retries: 3,
    expiresAfterSeconds: 120
  }
);
