import { readMailbox } from '$lib/server/services/mailbox';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ request, url, getClientAddress, depends }) => {
  depends('mailbox');
  return {
    messages: await readMailbox({
      address: getClientAddress(),
      host: url.hostname,
      isForwarded: request.headers.has('x-forwarded-for') || request.headers.has('forwarded')
    })
  };
};
