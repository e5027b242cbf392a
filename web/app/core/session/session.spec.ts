import { HttpClient, provideHttpClient, withInterceptors } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { firstValueFrom } from 'rxjs';
import type { Me } from '#shared/contract/session';
import { authInterceptor } from './auth-interceptor';
import { Session } from './session';

const QUAY = '00000001-0000-4000-8000-000000000001';
const BARN = '00000001-0000-4000-8000-000000000002';
const ORLA: Me = {
  id: '00000009-0000-4000-8000-000000000009',
  name: 'Orla Finch',
  email: 'orla@larkrise.example',
  owner: false,
  memberships: [
    { studioId: QUAY, role: 'maker' },
    { studioId: BARN, role: 'viewer' },
  ],
  company: 'Larkrise Candleworks',
  demo: null,
};
const MINUTE = 60_000;

describe('the session', () => {
  let session: Session;
  let http: HttpTestingController;

  const signedIn = (token: string) => ({
    accessToken: token,
    expiresAt: new Date(Date.now() + 10 * MINUTE).toISOString(),
    me: ORLA,
  });
  const signIn = async (token = 'first') => {
    const done = session.signIn(ORLA.email, 'a long password');
    http.expectOne('/api/sign-in').flush(signedIn(token));
    await done;
  };
  /** Lets promises that are already settled run. */
  const settle = () => vi.advanceTimersByTimeAsync(0);

  beforeEach(() => {
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout', 'Date', 'performance'] });
    localStorage.clear();
    TestBed.configureTestingModule({
      providers: [provideHttpClient(withInterceptors([authInterceptor])), provideHttpClientTesting()],
    });
    session = TestBed.inject(Session);
    http = TestBed.inject(HttpTestingController);
  });

  afterEach(() => {
    http.verify();
    vi.useRealTimers();
  });

  it('asks for no session where there never was one', async () => {
    await session.resume();
    expect(session.state()).toBe('signed-out');
  });

  it('takes up the session of an earlier visit', async () => {
    await signIn();
    const resumed = session.resume();
    http.expectOne('/api/session/refresh').flush(signedIn('second'));
    await resumed;
    expect(session.accessToken()).toBe('second');
  });

  it('waits for a gateway that is just starting', async () => {
    localStorage.setItem('stillroom.session', 'yes');
    const resumed = session.resume();
    http.expectOne('/api/session/refresh').error(new ProgressEvent('error'));
    await vi.advanceTimersByTimeAsync(1000);
    http.expectOne('/api/session/refresh').flush(signedIn('second'));
    await resumed;
    expect(session.signedIn()).toBe(true);
  });

  it('does not ask again when the earlier session was refused', async () => {
    localStorage.setItem('stillroom.session', 'yes');
    const resumed = session.resume();
    http.expectOne('/api/session/refresh').flush(null, { status: 401, statusText: '' });
    await resumed;
    expect(session.state()).toBe('signed-out');
    await vi.advanceTimersByTimeAsync(20_000);
  });

  it('holds permissions studio by studio', async () => {
    await signIn();
    expect(session.may('batches.pour', QUAY)).toBe(true);
    expect(session.may('batches.pour', BARN)).toBe(false);
    expect(session.may('rooms.read', 'elsewhere')).toBe(false);
    expect(session.mayAnywhere('batches.pour')).toBe(true);
    expect(session.mayAnywhere('people.read')).toBe(false);
  });

  it('exchanges the token a minute before it ends', async () => {
    await signIn();
    await vi.advanceTimersByTimeAsync(9 * MINUTE - 1);
    http.expectNone('/api/session/refresh');
    await vi.advanceTimersByTimeAsync(1);
    http.expectOne('/api/session/refresh').flush(signedIn('second'));
    await settle();
    expect(session.accessToken()).toBe('second');
  });

  it('stays signed in while the gateway is away and tries again', async () => {
    await signIn();
    await vi.advanceTimersByTimeAsync(9 * MINUTE);
    http.expectOne('/api/session/refresh').error(new ProgressEvent('error'));
    await settle();
    expect(session.signedIn()).toBe(true);
    await vi.advanceTimersByTimeAsync(10_000);
    http.expectOne('/api/session/refresh').flush(signedIn('second'));
    await settle();
    expect(session.accessToken()).toBe('second');
  });

  it('ends when the gateway refuses the exchange', async () => {
    await signIn();
    const refreshed = session.refresh();
    http.expectOne('/api/session/refresh').flush(null, { status: 401, statusText: '' });
    expect(await refreshed).toBe(false);
    expect(session.me()).toBeNull();
    expect(session.lastEnd()).toBe('ended');
  });

  it('exchanges once however many ask at the same time', async () => {
    await signIn();
    const both = Promise.all([session.refresh(), session.refresh()]);
    http.expectOne('/api/session/refresh').flush(signedIn('second'));
    expect(await both).toEqual([true, true]);
  });

  it('forgets everything on signing out, even when the gateway cannot be told', async () => {
    await signIn();
    const out = session.signOut().catch(() => 'not told');
    http.expectOne('/api/session/sign-out').error(new ProgressEvent('error'));
    expect(await out).toBe('not told');
    expect(session.state()).toBe('signed-out');
    expect(localStorage.length).toBe(0);
  });

  it('sends the token with requests and repeats one that came too late', async () => {
    await signIn();
    const reply = firstValueFrom(TestBed.inject(HttpClient).get('/api/studios'));
    await settle();
    const first = http.expectOne('/api/studios');
    expect(first.request.headers.get('Authorization')).toBe('Bearer first');
    first.flush(null, { status: 401, statusText: '' });
    http.expectOne('/api/session/refresh').flush(signedIn('second'));
    await settle();
    const again = http.expectOne('/api/studios');
    expect(again.request.headers.get('Authorization')).toBe('Bearer second');
    again.flush([]);
    expect(await reply).toEqual([]);
  });

  it('sends no token elsewhere', async () => {
    await signIn();
    const reply = firstValueFrom(TestBed.inject(HttpClient).get('https://elsewhere.example/api/x'));
    const request = http.expectOne('https://elsewhere.example/api/x');
    expect(request.request.headers.has('Authorization')).toBe(false);
    request.flush({});
    await reply;
  });
});
