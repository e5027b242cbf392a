import { request } from 'node:http';
import { Writable } from 'node:stream';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createLog } from '../create-log.js';
import { TestGateway, type TestPerson } from '../test-gateway.js';

describe('the web server against the outside', () => {
  let gateway: TestGateway;
  let owner: TestPerson;
  const lines: string[] = [];

  beforeAll(async () => {
    const sink = new Writable({
      write(chunk: Buffer, _encoding, done) {
        lines.push(...chunk.toString().trim().split('\n'));
        done();
      },
    });
    gateway = await TestGateway.open(createLog('trace', sink));
    owner = await gateway.addPerson('Olive Owner', { owner: true });
  });
  afterAll(() => gateway.close());

  const studio = { name: 'Quay', timeZone: 'Europe/Lisbon', unit: 'C' };
  const create = (headers: Record<string, string>, body: unknown = studio) =>
    gateway.call(owner, 'POST', '/api/studios', body, headers);

  /** A request with its path exactly as given; fetch would tidy it up. */
  function raw(
    path: string,
    headers: Record<string, string> = {},
  ): Promise<{ status: number; body: string }> {
    const { hostname, port } = new URL(gateway.url);
    return new Promise((resolve, reject) => {
      const sent = request({ hostname, port, path, headers }, (response) => {
        let body = '';
        response.on('data', (chunk: Buffer) => (body += chunk.toString()));
        response.on('end', () => resolve({ status: response.statusCode ?? 0, body }));
      });
      sent.on('error', reject);
      sent.end();
    });
  }

  it('serves pages that may run only scripts of this origin and stand in no frame', async () => {
    const { headers } = await gateway.call(null, 'GET', '/batches/somewhere');
    const policy = headers.get('content-security-policy')!;
    expect(policy).toContain(`default-src 'self'`);
    expect(policy).toContain(`script-src 'self';`);
    expect(policy).toContain(`object-src 'none'`);
    expect(policy).toContain(`frame-ancestors 'none'`);
    expect(policy).toContain(`connect-src 'self' ws://`);
    expect(policy).not.toMatch(/(script-src|style-src)\b(?!-attr)[^;]*unsafe/);
    expect(headers.get('x-content-type-options')).toBe('nosniff');
    expect(headers.get('referrer-policy')).toBe('no-referrer');
    expect(headers.get('x-powered-by')).toBeNull();
  });

  it('gives each page a nonce of its own for the styles the pages write', async () => {
    const nonces = await Promise.all(
      ['/', '/racks'].map(async (path) => {
        const { headers, body } = await gateway.call(null, 'GET', path);
        const [, nonce] = /style-src 'self' 'nonce-([\w+/=]{24,})'/.exec(
          headers.get('content-security-policy')!,
        )!;
        expect(body).toContain(`<sr-app ngCspNonce="${nonce}">`);
        expect(headers.get('cache-control')).toBe('no-store');
        return nonce;
      }),
    );
    expect(new Set(nonces).size).toBe(2);
  });

  it('answers other origins nothing they could read', async () => {
    const answer = await gateway.call(owner, 'GET', '/api/studios', undefined, {
      Origin: 'http://elsewhere.example',
    });
    expect(answer.headers.get('access-control-allow-origin')).toBeNull();
    const preflight = await gateway.call(null, 'OPTIONS', '/api/studios', undefined, {
      Origin: 'http://elsewhere.example',
      'Access-Control-Request-Method': 'POST',
    });
    expect(preflight.headers.get('access-control-allow-origin')).toBeNull();
  });

  it.each([
    ['another origin', { Origin: 'http://elsewhere.example' }],
    ['an origin without name', { Origin: 'null' }],
    ['a cross-site fetch', { 'Sec-Fetch-Site': 'cross-site' }],
    ['a fetch of a neighbouring site', { 'Sec-Fetch-Site': 'same-site' }],
  ])('refuses a change from %s', async (_from, headers) => {
    expect(await create(headers)).toMatchObject({ status: 403, body: { code: 'foreign-origin' } });
  });

  it('takes a change from its own origin', async () => {
    expect((await create({ Origin: gateway.url, 'Sec-Fetch-Site': 'same-origin' })).status).toBe(200);
  });

  it.each([
    'text/plain',
    'application/x-www-form-urlencoded',
    'multipart/form-data; boundary=x',
    'application/xml',
  ])('takes no body of the kind %s', async (kind) => {
    expect(await create({ 'Content-Type': kind }, JSON.stringify(studio))).toMatchObject({
      status: 400,
      body: { code: 'bad-input' },
    });
  });

  it('refuses what is no JSON, has unknown fields, a wrong encoding, or is too big', async () => {
    expect((await create({}, '{"name":')).status).toBe(400);
    expect((await create({}, { ...studio, position: 3 })).status).toBe(400);
    expect((await create({}, { ...studio, name: { $ne: null } })).status).toBe(400);
    expect((await create({ 'Content-Type': 'application/json; charset=klingon' })).status).toBe(400);
    expect((await create({ 'Content-Encoding': 'rot13' })).status).toBe(400);
    expect(await create({}, { ...studio, address: 'x'.repeat(300_000) })).toMatchObject({
      status: 413,
      body: { code: 'too-large' },
    });
  });

  it.each([
    '/../outside.txt',
    '/%2e%2e/outside.txt',
    '/..%2foutside.txt',
    '/..%5coutside.txt',
    '/assets/../../outside.txt',
    '//outside.txt',
    '/%00index.html',
    '/.env',
    '/%c0%ae%c0%ae/outside.txt',
  ])('serves no file outside its folder: %s', async (path) => {
    const { status, body } = await raw(path);
    expect(body).not.toContain('nobody may read this');
    expect([400, 404]).toContain(status);
  });

  it('gives problems as problem+json with the id that stands in the log', async () => {
    const answer = await gateway.call(null, 'GET', '/api/studios');
    expect(answer.headers.get('content-type')).toContain('application/problem+json');
    expect(answer.body).toMatchObject({ type: 'about:blank', status: 401, code: 'sign-in-needed' });
    expect(answer.headers.get('x-request-id')).toBe(answer.body.requestId);
    await expect
      .poll(() =>
        lines.map((line) => JSON.parse(line)).find(({ requestId }) => requestId === answer.body.requestId),
      )
      .toMatchObject({ method: 'GET', path: '/api/studios', status: 401 });
  });

  it('writes neither tokens nor passwords nor links into the log', async () => {
    const link = 'L'.repeat(43);
    const password = 'a-password-typed-wrongly';
    await gateway.call(null, 'POST', '/api/sign-in', { email: owner.email, password });
    await gateway.call(null, 'GET', `/api/invitations/${link}`);
    await raw(`/reset-password/${link}`, { Cookie: `stillroom-refresh=${link}` });
    await gateway.call(owner, 'GET', '/api/me');
    await expect.poll(() => lines.some((line) => line.includes('/reset-password/…'))).toBe(true);
    const all = lines.join('\n');
    expect(all).toContain('/api/invitations/…');
    for (const secret of [
      link,
      password,
      owner.token,
      gateway.settings.jwtSecret,
      gateway.settings.database.password + '"',
    ])
      expect(all).not.toContain(secret);
  });

  it('slows an address down that keeps guessing, without telling whom it guessed', async () => {
    const guess = (password: string) =>
      gateway.call(
        null,
        'POST',
        '/api/sign-in',
        { email: 'guess@larkrise.example', password },
        { 'X-Forwarded-For': '203.0.113.9' },
      );
    // A try that cannot be read counts like a wrong one, and costs no hash.
    for (let tries = 0; tries < 58; tries++) expect((await guess('')).status).toBe(400);
    const answers = [await guess('x'), await guess('x'), await guess('x'), await guess('')];
    expect(answers.map(({ status }) => status)).toEqual([401, 401, 429, 429]);
    expect(answers.at(-1)).toMatchObject({ body: { code: 'too-many-tries' } });
    expect(answers.at(-1)!.headers.get('retry-after')).toBe('600');
  });

  it('tells its health without a sign-in', async () => {
    expect(await gateway.call(null, 'GET', '/api/health')).toMatchObject({
      status: 200,
      body: { ok: true, parts: { database: 'answers', intake: 'keeps up' } },
    });
  });

  it('gives the description of the API to signed-in people only', async () => {
    expect((await gateway.call(null, 'GET', '/api/openapi.json')).status).toBe(401);
    expect((await gateway.call(owner, 'GET', '/api/openapi.json')).body.openapi).toBe('3.1.0');
  });

  it('says so when an address of the API does not exist', async () => {
    expect(await gateway.call(owner, 'GET', '/api/nonsense')).toMatchObject({
      status: 404,
      body: { code: 'not-found' },
    });
    expect((await gateway.call(owner, 'PATCH', '/api/studios')).status).toBe(404);
  });
});
