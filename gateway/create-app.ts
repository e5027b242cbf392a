import { randomBytes, randomUUID } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import type { ServerResponse } from 'node:http';
import { join, resolve } from 'node:path';
import express, { type Express, type NextFunction, type Request, type Response } from 'express';
import helmet from 'helmet';
import type { Logger } from 'pino';
import type { Problem } from '#shared/contract/problem';
import { limitAddresses } from './http/address-limits.js';
import { type Door, type Mounted, bearerOf, mountAll } from './http/mount.js';
import { ProblemError } from './http/problem-error.js';

export interface AppParts extends Door {
  readonly mounted: readonly Mounted[];
  /** Origins that may send changes; requests of browsers from elsewhere are refused. */
  readonly allowedOrigins: () => readonly string[];
  readonly webDir: string;
  /** Whether people come by https; browsers are then told never to come by http again. */
  readonly https: boolean;
  /** The API's description for signed-in people. */
  readonly openApi: object;
  /** Whether database and broker work; answers GET /api/health. */
  readonly health: () => Promise<{ ok: boolean; parts: Record<string, string> }>;
  readonly log: Logger;
}

/** The Express app of the gateway. Reads no environment and does not listen. */
export function createApp(parts: AppParts): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', 'loopback');
  app.use(logRequests(parts.log));
  app.use((_request, response, next) => {
    response.locals['nonce'] = randomBytes(18).toString('base64');
    next();
  });
  app.use(protectPages(parts));
  app.get('/api/health', async (_request, response) => {
    const health = await parts.health();
    response.status(health.ok ? 200 : 503).json(health);
  });
  app.use('/api', refuseForeignOrigins(parts.allowedOrigins));
  limitAddresses(app);
  app.use('/api', express.json({ limit: '256kb', strict: false }));
  mountAll(app, parts.mounted, parts);
  app.get('/api/openapi.json', async (request, response) => {
    if ((await parts.authenticate(bearerOf(request))) === null)
      throw new ProblemError('sign-in-needed', 'Sign in first.');
    response.set('Cache-Control', 'no-store').json(parts.openApi);
  });
  app.use('/api', () => {
    throw new ProblemError('not-found', 'There is no such address in this API.');
  });
  serveWeb(app, parts.webDir);
  app.use(answerProblems(parts.log));
  return app;
}

/** One line a request with its id; what links and tokens hold is never written. */
function logRequests(log: Logger) {
  return (request: Request, response: Response, next: NextFunction): void => {
    const requestId = randomUUID();
    response.locals['requestId'] = requestId;
    response.set('X-Request-Id', requestId);
    const startedAt = performance.now();
    const { method } = request;
    const path = request.path.replaceAll(LOOKS_SECRET, '…').slice(0, 300);
    response.on('close', () => {
      log[response.statusCode < 400 ? 'debug' : 'info'](
        {
          requestId,
          method,
          path,
          status: response.statusCode,
          ms: Math.round(performance.now() - startedAt),
          personId: response.locals['personId'] as string | undefined,
          ...(response.writableFinished ? {} : { aborted: true }),
        },
        'request',
      );
    });
    next();
  };
}

/** Tokens of mailed links have 43 signs; ids have 36. */
const LOOKS_SECRET = /[\w-]{40,}/g;

function protectPages({ https, allowedOrigins }: AppParts) {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        baseUri: ["'self'"],
        // Older browsers do not count the live connection to the same host as 'self'.
        connectSrc: [
          "'self'",
          () =>
            allowedOrigins()
              .map((origin) => origin.replace(/^http/, 'ws'))
              .join(' '),
        ],
        fontSrc: ["'self'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        objectSrc: ["'none'"],
        scriptSrc: ["'self'"],
        // Angular writes component styles as style elements and gives them the nonce of the page.
        styleSrc: ["'self'", (_request, response) => `'nonce-${nonceOf(response)}'`],
        // Attributes only: style values of single elements, which can load nothing and run nothing.
        styleSrcAttr: ["'unsafe-inline'"],
      },
    },
    strictTransportSecurity: https ? { maxAge: 31_536_000, includeSubDomains: false } : false,
    crossOriginEmbedderPolicy: false,
  });
}

/** Browsers send Origin and Sec-Fetch-Site with every change; a change from another site is refused. */
function refuseForeignOrigins(allowed: () => readonly string[]) {
  return (request: Request, _response: Response, next: NextFunction): void => {
    if (request.method === 'GET' || request.method === 'HEAD') return next();
    const origin = request.get('origin');
    const site = request.get('sec-fetch-site');
    if (
      (origin !== undefined && !allowed().includes(origin)) ||
      site === 'cross-site' ||
      site === 'same-site'
    ) {
      throw new ProblemError('foreign-origin', 'This change came from another site and was refused.');
    }
    if (
      request.get('content-length') !== '0' &&
      request.get('content-type') !== undefined &&
      !request.is('application/json')
    ) {
      throw new ProblemError('bad-input', 'Send JSON (Content-Type: application/json).');
    }
    next();
  };
}

function serveWeb(app: Express, webDir: string): void {
  const root = resolve(webDir);
  app.use(
    express.static(root, {
      index: false,
      setHeaders: (response, path) => {
        const hashed = /-[A-Z0-9]{8}\.(js|css|woff2)$/.test(path);
        response.set('Cache-Control', hashed ? 'public, max-age=31536000, immutable' : 'no-cache');
      },
    }),
  );
  app.get('/{*rest}', async (request, response) => {
    if (request.path.includes('.')) throw new ProblemError('not-found', 'There is no such file.');
    const page = await readFile(join(root, 'index.html'), 'utf8').catch(() => null);
    if (page === null)
      throw new ProblemError('not-found', 'The web pages have not been built. Run npm run build.');
    // Angular looks for the nonce on an element inside the body.
    const withNonce = page.replace('<sr-app', `<sr-app ngCspNonce="${nonceOf(response)}"`);
    response.set('Cache-Control', 'no-store').type('html').send(withNonce);
  });
}

function nonceOf(response: ServerResponse): string {
  return (response as Response).locals['nonce'] as string;
}

function answerProblems(log: Logger) {
  return (error: unknown, _request: Request, response: Response, _next: NextFunction): void => {
    const requestId = response.locals['requestId'] as string;
    const known = asProblemError(error);
    if (known.code === 'internal') log.error({ requestId, err: error }, 'request failed');
    if (response.headersSent) return void response.end();
    const body: Problem = {
      type: 'about:blank',
      title: known.code.replaceAll('-', ' '),
      status: known.status,
      code: known.code,
      detail: known.detail,
      requestId,
      ...(known.fields ? { fields: [...known.fields] } : {}),
    };
    if (known.retryAfterSeconds !== undefined) response.set('Retry-After', String(known.retryAfterSeconds));
    response.status(known.status).type('application/problem+json').send(JSON.stringify(body));
  };
}

function asProblemError(error: unknown): ProblemError {
  if (error instanceof ProblemError) return error;
  const { type, status } = (error ?? {}) as { type?: string; status?: number };
  if (type === 'entity.too.large')
    return new ProblemError('too-large', 'That is more than this address takes.');
  if (type === 'entity.parse.failed') return new ProblemError('bad-input', 'The body is not valid JSON.');
  // Other refusals of the parser and the file server: a broken encoding, a connection cut half way, a path out of the folder.
  if (type !== undefined && status !== undefined && status < 500)
    return new ProblemError('bad-input', 'The request could not be read. Send JSON in UTF-8.');
  if (error instanceof URIError) return new ProblemError('bad-input', 'The address is not well formed.');
  return new ProblemError(
    'internal',
    'Something went wrong here. Nothing was changed; try again, and tell the owner if it stays.',
  );
}
