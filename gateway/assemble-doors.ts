import type { Logger } from 'pino';
import type { DataSource } from 'typeorm';
import type { PersonChanged } from './announcements.js';
import type { Clock } from './clock.js';
import { Audit } from './features/audit/audit.js';
import { AuditRepository } from './features/audit/audit-repository.js';
import { mountAudit } from './features/audit/audit-routes.js';
import { People } from './features/people/people.js';
import { PeopleRepository } from './features/people/people-repository.js';
import { mountPeople } from './features/people/people-routes.js';
import { AccessTokens } from './features/sign-in/access-tokens.js';
import { PasswordHashes } from './features/sign-in/password-hashes.js';
import { Passwords } from './features/sign-in/passwords.js';
import { PasswordsRepository } from './features/sign-in/passwords-repository.js';
import { RefreshTokens } from './features/sign-in/refresh-tokens.js';
import { SessionsRepository } from './features/sign-in/sessions-repository.js';
import { SignIn } from './features/sign-in/sign-in.js';
import { RefreshCookie, mountSignIn } from './features/sign-in/sign-in-routes.js';
import { SlowDown } from './features/sign-in/slow-down.js';
import { Studios } from './features/studios/studios.js';
import { StudiosRepository } from './features/studios/studios-repository.js';
import { mountStudios } from './features/studios/studios-routes.js';
import type { Feeds } from './feeds.js';
import type { Authenticate, Mounted } from './http/mount.js';
import type { Settings } from './settings.js';

export interface DoorsNeeds {
  readonly settings: Settings;
  readonly dataSource: DataSource;
  readonly feeds: Feeds;
  /** The time audit lines carry. */
  readonly clock: Clock;
  /** The time sessions and links end by. */
  readonly systemClock: Clock;
  readonly log: Logger;
}

/** Who may come in: sign-in, people, studios and the audit trail. */
export interface Doors {
  readonly mounted: readonly Mounted[];
  readonly signIn: SignIn;
  readonly studios: Studios;
  readonly authenticate: Authenticate;
  stop(): Promise<void>;
}

export function assembleDoors(needs: DoorsNeeds): Doors {
  const { dataSource, feeds, clock } = needs;
  const hashes = new PasswordHashes();
  const { signIn, passwords } = assembleSignIn(needs, hashes);
  const studios = new Studios({
    repository: new StudiosRepository(dataSource),
    clock,
    changed: (studioId) => feeds.layout.announce({ studioId, roomId: null }),
  });
  return {
    mounted: [
      ...mountSignIn(signIn, passwords, new RefreshCookie(needs.settings.http.secureCookies)),
      ...mountPeople(assemblePeople(needs)),
      ...mountStudios(studios),
      ...mountAudit(new Audit(new AuditRepository(dataSource))),
    ],
    ...{ signIn, studios },
    authenticate: async (bearer) => (bearer === null ? null : (await signIn.authenticate(bearer)).person),
    async stop() {
      await passwords.settled();
      await hashes.stop();
    },
  };
}

function assembleSignIn(needs: DoorsNeeds, hashes: PasswordHashes): { signIn: SignIn; passwords: Passwords } {
  const { settings, dataSource, feeds, clock, systemClock, log } = needs;
  const repository = new SessionsRepository(dataSource);
  const slowDown = new SlowDown(() => performance.now());
  const common = {
    hashes,
    slowDown,
    clock: systemClock,
    company: settings.company,
    changed: (change: PersonChanged) => feeds.people.announce(change),
  };
  const signIn = new SignIn({
    ...common,
    repository,
    accessTokens: new AccessTokens(settings.jwtSecret, systemClock),
    refreshTokens: new RefreshTokens(settings.jwtSecret),
    wait: (ms) => new Promise((resolve) => setTimeout(resolve, ms)),
    demo: settings.demo ? { deskUrl: settings.demo.deskUrl } : null,
    stolen: (session) => log.warn(session, 'a refresh token was shown twice; its session was ended'),
  });
  const passwords = new Passwords({
    ...common,
    repository: new PasswordsRepository(dataSource),
    accounts: repository,
    auditClock: clock,
    publicUrl: settings.http.publicUrl,
    failed: (error) => log.error({ err: error }, 'a password link could not be written'),
  });
  return { signIn, passwords };
}

function assemblePeople({ settings, dataSource, feeds, clock, systemClock }: DoorsNeeds): People {
  return new People({
    repository: new PeopleRepository(dataSource),
    clock: systemClock,
    auditClock: clock,
    company: settings.company,
    publicUrl: settings.http.publicUrl,
    changed: (change) => feeds.people.announce(change),
    studioChanged: (studioId) => feeds.layout.announce({ studioId, roomId: null }),
  });
}
