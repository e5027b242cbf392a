import { computed, inject, Injectable, signal } from '@angular/core';
import { may, mayAnywhere, type Permission, type Role, roleIn } from '#shared/contract/roles';
import type { Me, sessionRoutes, SignedIn } from '#shared/contract/session';
import { Api } from '../api/api';
import { ApiError } from '../api/api-error';

export type SessionState = 'unknown' | 'signed-out' | 'signed-in';

/** Why a session ended, for the sentence on the sign-in page. */
export type SessionEnd = 'signed-out' | 'ended' | 'role-changed';

const HINT = 'stillroom.session';
const EARLY_MS = 60_000;
const SHORTEST_MS = 30_000;
const LONGEST_MS = 10 * 60_000;
const RETRY_MS = 10_000;
const RESUME_TRIES = 15;
const RESUME_MS = 1000;

/**
 * Who is signed in. The access token lives in memory only and is exchanged a minute before it ends; the refresh
 * token is a cookie no script can read.
 */
@Injectable({ providedIn: 'root' })
export class Session {
  private readonly api = inject(Api);
  private readonly channel = 'BroadcastChannel' in globalThis ? new BroadcastChannel(HINT) : null;
  private readonly writableMe = signal<Me | null>(null);
  private readonly writableState = signal<SessionState>('unknown');
  private readonly writableToken = signal<string | null>(null);
  private readonly writableEnd = signal<SessionEnd | null>(null);
  private goodUntil = 0;
  private timer: ReturnType<typeof setTimeout> | undefined;
  private refreshing: Promise<boolean> | null = null;

  /** The person signed in, or null. */
  readonly me = this.writableMe.asReadonly();
  readonly state = this.writableState.asReadonly();
  /** The present access token; changes whenever it is exchanged. */
  readonly accessToken = this.writableToken.asReadonly();
  /** Why the last session ended. */
  readonly lastEnd = this.writableEnd.asReadonly();
  readonly signedIn = computed(() => this.writableState() === 'signed-in');

  constructor() {
    this.channel?.addEventListener('message', (event: MessageEvent<unknown>) => {
      if (event.data === 'signed-out') this.forget('signed-out');
    });
  }

  /** Takes up the session of an earlier visit, if there is one. Never throws. */
  async resume(): Promise<void> {
    for (let tries = 0; localStorage.getItem(HINT) !== null && tries < RESUME_TRIES; tries++) {
      if (await this.refresh()) return;
      // Refused, the hint is gone; else the gateway is just starting.
      if (localStorage.getItem(HINT) !== null) await new Promise((resolve) => setTimeout(resolve, RESUME_MS));
    }
    this.writableState.set('signed-out');
  }

  /** Signs in. @throws ApiError */
  async signIn(email: string, password: string): Promise<void> {
    this.take(
      await this.api.call<typeof sessionRoutes.signIn>('POST', '/api/sign-in', {
        body: { email, password },
        anonymous: true,
      }),
    );
  }

  /** Ends this session here and on the gateway. */
  async signOut(): Promise<void> {
    try {
      await this.api.call<typeof sessionRoutes.signOut>('POST', '/api/session/sign-out', { anonymous: true });
    } finally {
      this.forget('signed-out');
      this.channel?.postMessage('signed-out');
    }
  }

  /** A token good for at least another half minute, exchanged if need be; null when nobody is signed in. */
  async freshToken(): Promise<string | null> {
    if (this.writableToken() !== null && performance.now() > this.goodUntil - SHORTEST_MS)
      await this.refresh();
    return this.writableToken();
  }

  /**
   * Exchanges the refresh cookie for a new token. Tabs take turns, because a refresh token used twice ends the session.
   * @param otherwise why the session ended, should the gateway refuse
   * @returns whether somebody is signed in afterwards
   */
  refresh(otherwise: SessionEnd = 'ended'): Promise<boolean> {
    this.refreshing ??= inTurn(() => this.exchange(otherwise)).finally(() => {
      this.refreshing = null;
    });
    return this.refreshing;
  }

  /** Forgets the session after the gateway ended it. */
  end(why: SessionEnd): void {
    this.forget(why);
  }

  /** The role held in a studio, or null. */
  roleIn(studioId: string): Role | null {
    const me = this.writableMe();
    return me ? roleIn(me, studioId) : null;
  }

  /** Whether the person has a permission in a studio. */
  may(permission: Permission, studioId: string): boolean {
    return may(this.roleIn(studioId), permission);
  }

  /** Whether the person has a permission in any studio (for company-wide pages). */
  mayAnywhere(permission: Permission): boolean {
    const me = this.writableMe();
    return me !== null && mayAnywhere(me, permission);
  }

  private async exchange(otherwise: SessionEnd): Promise<boolean> {
    try {
      this.take(
        await this.api.call<typeof sessionRoutes.refresh>('POST', '/api/session/refresh', {
          anonymous: true,
        }),
      );
      return true;
    } catch (error) {
      const refused =
        error instanceof ApiError && error.status >= 400 && error.status < 500 && error.status !== 429;
      if (refused) {
        this.forget(otherwise);
        return false;
      }
      // The gateway is away for a moment: stay signed in and try again.
      if (this.signedIn()) this.refreshIn(RETRY_MS);
      return this.signedIn();
    }
  }

  private take(signedIn: SignedIn): void {
    // A device's clock may be wrong by hours; the token is then simply exchanged at the usual pace.
    const lifetime = new Date(signedIn.expiresAt).getTime() - Date.now();
    const trusted = Math.min(LONGEST_MS, Math.max(2 * EARLY_MS, lifetime));
    this.goodUntil = performance.now() + trusted;
    this.writableToken.set(signedIn.accessToken);
    this.writableMe.set(signedIn.me);
    this.writableState.set('signed-in');
    this.writableEnd.set(null);
    localStorage.setItem(HINT, 'yes');
    this.refreshIn(trusted - EARLY_MS);
  }

  private refreshIn(ms: number): void {
    clearTimeout(this.timer);
    this.timer = setTimeout(() => void this.refresh(), ms);
  }

  private forget(why: SessionEnd): void {
    clearTimeout(this.timer);
    localStorage.removeItem(HINT);
    this.writableEnd.set(this.writableState() === 'signed-in' ? why : null);
    this.writableToken.set(null);
    this.writableMe.set(null);
    this.writableState.set('signed-out');
  }
}

/** Runs one exchange at a time over all tabs of this browser, where it can hold them in turn. */
async function inTurn(exchange: () => Promise<boolean>): Promise<boolean> {
  if (!('locks' in navigator)) return exchange();
  return navigator.locks.request('stillroom.refresh', exchange);
}
