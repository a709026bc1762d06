import { redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { useLab } from '$lib/server/auth/authjs';
import { checked } from '$lib/server/form-answer';
import type { RequestHandler } from './$types';

/** Moves the session to another of the person's labs and begins at its start page: addresses of one lab mean nothing in another. */
export const POST: RequestHandler = async (event) => {
  const form = await event.request.formData();
  const { lab } = checked(z.object({ lab: z.uuid('Choose one of your labs.') }), { lab: form.get('lab') });
  await useLab(event, lab);
  redirect(303, '/');
};
