import type { RequestEvent } from '@sveltejs/kit';
import { actions as accountActions } from '../../../src/routes/(app)/account/+page.server';
import {
  actions as memberActions,
  load as membersLoad
} from '../../../src/routes/(app)/lab/members/+page.server';
import { POST as signOut } from '../../../src/routes/(app)/sign-out/+server';
import { POST as switchLab } from '../../../src/routes/(app)/switch-lab/+server';
import { actions as forgotActions } from '../../../src/routes/(public)/forgot-password/+page.server';
import {
  actions as invitationActions,
  load as invitationLoad
} from '../../../src/routes/(public)/invitations/[token]/+page.server';
import {
  actions as resetActions,
  load as resetLoad
} from '../../../src/routes/(public)/reset-password/[token]/+page.server';
import { actions as signInActions } from '../../../src/routes/(public)/sign-in/+page.server';
import type { Actor } from '../../../src/lib/domain/actor';
import type { Answer, TestBrowser } from './browser';

type Fields = Readonly<Record<string, string>>;
type Run = (event: RequestEvent) => unknown;

/** The framework types each page's functions for its own route; here they are all given the same event. */
const named = (functions: unknown, name: string): Run =>
  (functions as Readonly<Record<string, Run>>)[name] as Run;

/** What a person does at the pages of this part, in one call each. */
export const pages = {
  signIn: (browser: TestBrowser, form: Fields, address?: string): Promise<Answer> =>
    browser.visit(
      { routeId: '/(public)/sign-in', path: '/sign-in', form, ...(address ? { address } : {}) },
      named(signInActions, 'default')
    ),
  signOut: (browser: TestBrowser) =>
    browser.visit({ routeId: '/(app)/sign-out', path: '/sign-out', form: {} }, signOut as Run),
  switchLab: (browser: TestBrowser, lab: string) =>
    browser.visit({ routeId: '/(app)/switch-lab', path: '/switch-lab', form: { lab } }, switchLab as Run),
  /** Opens the start page, and answers who the program takes the person for. */
  whoAmI: async (browser: TestBrowser): Promise<Actor | null> => {
    const answer = await browser.visit({ routeId: '/(app)', path: '/' }, (event) => event.locals.actor);
    return answer.status === 200 ? (answer.data as Actor) : null;
  },
  openStart: (browser: TestBrowser) => browser.visit({ routeId: '/(app)', path: '/' }, () => null),
  account: (browser: TestBrowser, action: 'name' | 'password', form: Fields) =>
    browser.visit(
      { routeId: '/(app)/account', path: `/account?/${action}`, form },
      named(accountActions, action)
    ),
  members: (browser: TestBrowser) =>
    browser.visit({ routeId: '/(app)/lab/members', path: '/lab/members' }, membersLoad as Run),
  manage: (browser: TestBrowser, action: 'invite' | 'revoke' | 'role' | 'remove', form: Fields) =>
    browser.visit(
      { routeId: '/(app)/lab/members', path: `/lab/members?/${action}`, form },
      named(memberActions, action)
    ),
  forgot: (browser: TestBrowser, email: string, address?: string) =>
    browser.visit(
      {
        routeId: '/(public)/forgot-password',
        path: '/forgot-password',
        form: { email },
        ...(address ? { address } : {})
      },
      named(forgotActions, 'default')
    ),
  openReset: (browser: TestBrowser, token: string) =>
    browser.visit(
      { routeId: '/(public)/reset-password/[token]', path: `/reset-password/${token}`, params: { token } },
      resetLoad as Run
    ),
  reset: (browser: TestBrowser, token: string, form: Fields) =>
    browser.visit(
      {
        routeId: '/(public)/reset-password/[token]',
        path: `/reset-password/${token}`,
        params: { token },
        form
      },
      named(resetActions, 'default')
    ),
  openInvitation: (browser: TestBrowser, token: string) =>
    browser.visit(
      { routeId: '/(public)/invitations/[token]', path: `/invitations/${token}`, params: { token } },
      invitationLoad as Run
    ),
  accept: (browser: TestBrowser, token: string, action: 'create' | 'join', form: Fields) =>
    browser.visit(
      {
        routeId: '/(public)/invitations/[token]',
        path: `/invitations/${token}?/${action}`,
        params: { token },
        form
      },
      named(invitationActions, action)
    )
};
