import { randomUUID } from 'node:crypto';
import { resolve } from 'node:path';
import express, { type Express, type NextFunction, type Request, type Response } from 'express';
import helmet from 'helmet';
import type { Logger } from 'pino';
import type { Problem } from '#shared/contract/problem';
import { type Authenticate, type Mounted, mountAll } from './http/mount.js';
import { ProblemError } from './http/problem-error.js';

export interface AppParts {
  readonly mounted: readonly Mounted[];
  readonly authenticate: Authenticate;
  /** Origins that may send changes; requests of browsers from elsewhere are refused. */
  readonly allowedOrigins: () => readonly string[];
  readonly webDir: string;
  /** Whether database and broker work; answers GET /api/health. */
  readonly health: () => Promise<{ ok: boolean; parts: Record<string, string> }>;
  readonly log: Logger;
}

/** The Express app of the gateway. Reads no environment and does not listen. */
export function createApp(parts: AppParts): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', 'loopback');
  app.use((request, response, next) => {
    response.locals['requestId'] = randomUUID();
    response.set('X-Request-Id', response.locals['requestId'] as string);
    const startedAt = performance.now();
    response.on('finish', () => {
      parts.log.debug(
        {
          requestId: response.locals['requestId'] as string,
          method: request.method,
          path: request.path,
          status: response.statusCode,
          ms: Math.round(performance.now() - startedAt),
        },
        'request',
      );
    });
    next();
  });
  app.use(
    helmet({
      contentSecurityPolicy: {
        useDefaults: false,
        directives: {
          defaultSrc: ["'self'"],
          baseUri: ["'self'"],
          connectSrc: ["'self'", 'ws:', 'wss:'],
          fontSrc: ["'self'"],
          formAction: ["'self'"],
          frameAncestors: ["'none'"],
          imgSrc: ["'self'", 'data:', 'blob:'],
          objectSrc: ["'none'"],
          scriptSrc: ["'self'"],
          // Angular writes component styles as style elements.
          styleSrc: ["'self'", "'unsafe-inline'"],
        },
      },
      strictTransportSecurity: false,
      crossOriginEmbedderPolicy: false,
    }),
  );
  app.get('/api/health', async (_request, response) => {
    const health = await parts.health();
    response.status(health.ok ? 200 : 503).json(health);
  });
  app.use('/api', refuseForeignOrigins(parts.allowedOrigins));
  app.use('/api', express.json({ limit: '256kb', strict: false }));
  mountAll(app, parts.mounted, parts.authenticate);
  app.use('/api', () => {
    throw new ProblemError('not-found', 'There is no such address in this API.');
  });
  serveWeb(app, parts.webDir);
  app.use(answerProblems(parts.log));
  return app;
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
  app.get('/{*rest}', (request, response, next) => {
    if (request.path.includes('.')) return next(new ProblemError('not-found', 'There is no such file.'));
    response.sendFile('index.html', { root, headers: { 'Cache-Control': 'no-cache' } }, (error) => {
      if (error && !response.headersSent)
        next(new ProblemError('not-found', 'The web pages have not been built. Run npm run build.'));
    });
  });
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
    response.status(known.status).type('application/problem+json').send(JSON.stringify(body));
  };
}

function asProblemError(error: unknown): ProblemError {
  if (error instanceof ProblemError) return error;
  const type = (error as { type?: string } | null)?.type;
  if (type === 'entity.too.large')
    return new ProblemError('too-large', 'That is more than this address takes.');
  if (type === 'entity.parse.failed') return new ProblemError('bad-input', 'The body is not valid JSON.');
  if (error instanceof URIError) return new ProblemError('bad-input', 'The address is not well formed.');
  return new ProblemError(
    'internal',
    'Something went wrong here. Nothing was changed; try again, and tell the owner if it stays.',
  );
}
