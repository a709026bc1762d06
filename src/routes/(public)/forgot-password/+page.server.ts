import { forgottenForm } from '$lib/schemas/passwords';
import { config } from '$lib/server/config';
import { answerForm, checked } from '$lib/server/form-answer';
import { linkOrigin } from '$lib/server/mail/link-origin';
import { usesLocalMailbox } from '$lib/server/mail/transport';
import { requestPasswordReset } from '$lib/server/services/passwords';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = () => ({ hasLocalMailbox: usesLocalMailbox() });

export const actions: Actions = {
  default: ({ request, url, getClientAddress }) =>
    answerForm(request, async (fields) => {
      const { email } = checked(forgottenForm, fields);
      await requestPasswordReset({ email, address: getClientAddress(), origin: linkOrigin(config(), url) });
      return { sentTo: email };
    })
};
