import { sequence } from '@sveltejs/kit/hooks';
import type { HandleServerError, ServerInit } from '@sveltejs/kit';
import { describeApiProblems } from '$lib/server/hooks/api-problems';
import { authenticate } from '$lib/server/hooks/authenticate';
import { authorize } from '$lib/server/hooks/authorize';
import { compress } from '$lib/server/hooks/compress';
import { answerUnexpected } from '$lib/server/hooks/error';
import { initialise } from '$lib/server/hooks/init';
import { nameRequest } from '$lib/server/hooks/request-id';
import { secureHeaders } from '$lib/server/hooks/security-headers';
import { applyTheme } from '$lib/server/hooks/theme';

export const init: ServerInit = initialise;

// From the outside in: the first sees the request first and the answer last. Who the person is, and whether they may,
// is asked last, so that refusals too carry an id, the headers and the right form.
export const handle = sequence(
  nameRequest,
  secureHeaders,
  compress,
  applyTheme,
  describeApiProblems,
  authenticate,
  authorize
);

export const handleError: HandleServerError = answerUnexpected;
