import type { CookieOptions } from 'express';
import { ipKeyGenerator } from 'express-rate-limit';
import type { RouteDefinition } from '#shared/contract/route';
import { type SignedIn, sessionRoutes } from '#shared/contract/session';
import { type Call, type Mounted, mount } from '../../http/mount.js';
import type { Passwords } from './passwords.js';
import type { Kept, SignIn, Visitor } from './sign-in.js';

const COOKIE_PATH = '/api/session';

/** The refresh cookie: no script can read it, no other site can send it, and it travels only where it is used. */
export class RefreshCookie {
  readonly name: string;
  readonly #options: CookieOptions;

  /** @param secure whether people come by https; the name then carries the prefix that browsers enforce */
  constructor(secure: boolean) {
    this.name = secure ? '__Secure-stillroom-refresh' : 'stillroom-refresh';
    this.#options = { httpOnly: true, sameSite: 'strict', secure, path: COOKIE_PATH };
  }

  read(call: Call<RouteDefinition>): string | null {
    return call.cookies.read(this.name);
  }

  /** Sets the cookie and gives the rest as the answer. */
  keep(call: Call<RouteDefinition>, { refreshToken, until, ...answer }: SignedIn & Kept): SignedIn {
    call.cookies.set(this.name, refreshToken, { ...this.#options, expires: until });
    return answer;
  }

  drop(call: Call<RouteDefinition>): void {
    call.cookies.clear(this.name, this.#options);
  }
}

export function mountSignIn(signIn: SignIn, passwords: Passwords, cookie: RefreshCookie): Mounted[] {
  return [...mountSessions(signIn, cookie), ...mountPasswords(passwords)];
}

function mountSessions(signIn: SignIn, cookie: RefreshCookie): Mounted[] {
  return [
    mount(sessionRoutes.signIn, async (call) =>
      cookie.keep(call, await signIn.signIn(call.body.email, call.body.password, visitorOf(call))),
    ),
    mount(sessionRoutes.refresh, async (call) => {
      try {
        return cookie.keep(call, await signIn.refresh(cookie.read(call), visitorOf(call)));
      } catch (error) {
        if ((error as { status?: number }).status === 401) cookie.drop(call);
        throw error;
      }
    }),
    mount(sessionRoutes.signOut, async (call) => {
      await signIn.signOut(cookie.read(call));
      cookie.drop(call);
      return null;
    }),
    mount(sessionRoutes.me, async ({ person }) => signIn.me(person())),
    mount(sessionRoutes.sessions, ({ person }) => signIn.sessions(person())),
    mount(sessionRoutes.endSession, async ({ person, params }) => {
      await signIn.endSession(person(), params.sessionId);
      return null;
    }),
  ];
}

function mountPasswords(passwords: Passwords): Mounted[] {
  return [
    mount(sessionRoutes.changePassword, async ({ person, body, address }) => {
      await passwords.change(person(), body, address);
      return null;
    }),
    mount(sessionRoutes.forgotPassword, async ({ body, address }) => {
      passwords.forgot(body.email, address);
      return null;
    }),
    mount(sessionRoutes.resetPassword, async ({ body, address }) => {
      await passwords.reset(body.token, body.password, address);
      return null;
    }),
    mount(sessionRoutes.invitation, ({ params }) => passwords.invitation(params.token)),
    mount(sessionRoutes.acceptInvitation, async ({ params, body, address }) => {
      await passwords.accept(params.token, body.name, body.password, address);
      return null;
    }),
  ];
}

function visitorOf({ address, userAgent }: Call<RouteDefinition>): Visitor {
  return { address, network: address === '' ? '' : ipKeyGenerator(address), userAgent };
}
