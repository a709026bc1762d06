import { error, redirect, type Handle, type RequestEvent } from '@sveltejs/kit';
import { isAllowed } from '../../domain/permissions';
import { signInPath } from '../auth/next-path';
import { refusalSentence } from '../auth/refusal';
import { isPermission, isWriteByKey, requiredAccess, scopeNeeded } from '../auth/route-access';
import { Forbidden, NotFound, Unauthenticated, type ExpectedError } from '../errors';
import { logger } from '../logger';
import { isEnhancedForm, keepForm } from './kept-form';
import { problemResponse } from './problem';

const nobodyAsks =
  'Nobody is signed in here, and no access key came with the request (Authorization: Bearer …).';

const isApi = (routeId: string): boolean => routeId.startsWith('/api/');

function refuse(routeId: string, refusal: ExpectedError): Response {
  if (isApi(routeId)) return problemResponse(refusal);
  error(refusal.status, refusal.message);
}

/** Sends a stranger to the sign-in page and back; programs get 401 and its reason, a page its form with what was typed. */
async function turnAway(routeId: string, { url, request }: RequestEvent): Promise<Response> {
  if (isApi(routeId)) return problemResponse(new Unauthenticated(nobodyAsks));
  if (isEnhancedForm(request)) return keepForm(request);
  // After a form was sent, the way back is to the page that held it, not to its action.
  const search = request.method === 'GET' ? url.search : '';
  redirect(303, signInPath(url.pathname, search));
}

/** Why a request is refused by what its key may do, or for want of one; null: it is not. */
function refusalOfKey(
  routeId: string,
  method: string,
  scopes: App.Locals['keyScopes']
): Forbidden | Unauthenticated | null {
  const scope = scopeNeeded(routeId, method);
  if (scopes === null) {
    return isWriteByKey(routeId, method)
      ? new Unauthenticated(
          'This takes an access key, sent as "Authorization: Bearer …"; a session does not do.'
        )
      : null;
  }
  if (scope === null) return new Forbidden('No access key can do this; a person does it on the page.');
  if (scopes.includes(scope)) return null;
  return new Forbidden(
    `This takes an access key with the scope "${scope}". This one has "${scopes.join(', ')}".`
  );
}

/** Denies by default, by route id: pages, their data, form actions and endpoints alike. */
export const authorize: Handle = async ({ event, resolve }) => {
  const routeId = event.route.id;
  if (routeId === null) return resolve(event);
  const { actor } = event.locals;
  const access = requiredAccess({
    routeId,
    method: event.request.method,
    parameters: event.url.searchParams
  });
  if (access === null) {
    logger.warn({ routeId, method: event.request.method }, 'refused: the route table does not list this');
    return refuse(routeId, new NotFound());
  }
  if (access === 'public') return resolve(event);
  if (actor === null) return turnAway(routeId, event);
  const keyRefusal = refusalOfKey(routeId, event.request.method, event.locals.keyScopes);
  if (keyRefusal) return refuse(routeId, keyRefusal);
  if (isPermission(access) && !isAllowed(actor.role, access)) {
    return refuse(routeId, new Forbidden(refusalSentence(actor.role, access)));
  }
  return resolve(event);
};
