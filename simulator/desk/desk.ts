import { readFileSync } from 'node:fs';
import type { Server } from 'node:http';
import express, { type NextFunction, type Request, type Response } from 'express';
import helmet from 'helmet';
import { z } from 'zod';
import { type DemoTime, SPEEDS } from '../demo-time.js';
import { PUSHES, type PushName, type SimulatedFloor } from '../floor.js';
import type { Mailbox } from '../mailbox.js';
import { FAULTS } from '../physics/sensor-model.js';
import { DESK_PAGE, DESK_SCRIPT, DESK_STYLE } from './desk-page.js';

export interface DeskParts {
  readonly time: DemoTime;
  readonly floor: SimulatedFloor;
  readonly mailbox: Mailbox;
  /** Address of Stillroom itself. */
  readonly pagesUrl: string;
  /** Told after the speed was changed. */
  readonly clockChanged: () => void;
  readonly health: () => object;
}

const speedBody = z.object({ speed: z.number().min(1).max(20_000) }).strict();
const pushBody = z.object({ push: z.enum(Object.keys(PUSHES) as [PushName, ...PushName[]]) }).strict();
const faultBody = z.object({ fault: z.enum(FAULTS).nullable() }).strict();

/**
 * The demo desk on loopback: mailbox, speed of the demo's time, pushes on rooms, faults of sensors; as a page and as JSON.
 * @returns closes it
 */
export async function startDesk(port: number, parts: DeskParts): Promise<() => Promise<void>> {
  const app = express();
  app.disable('x-powered-by');
  app.use(
    helmet({
      strictTransportSecurity: false,
      contentSecurityPolicy: { directives: { upgradeInsecureRequests: null } },
    }),
  );
  app.use(refuseForeign);
  app.use(express.json({ limit: '10kb' }));
  app.get('/', (_request, response) => void response.type('html').send(DESK_PAGE));
  app.get('/desk.css', (_request, response) => void response.type('css').send(DESK_STYLE));
  app.get('/desk.js', (_request, response) => void response.type('js').send(DESK_SCRIPT));
  app.get('/roboto-condensed.woff2', (_request, response) => void response.type('woff2').send(fontFile()));
  mountClock(app, parts);
  mountFloor(app, parts);
  mountMailbox(app, parts);
  app.use((error: unknown, _request: Request, response: Response, next: NextFunction) => {
    if (response.headersSent) return next(error);
    const known = error instanceof z.ZodError;
    response
      .status(known ? 400 : 500)
      .json({ error: known ? z.prettifyError(error) : 'Something went wrong at the desk.' });
  });
  const server = await new Promise<Server>((resolve, reject) => {
    const listening = app.listen(port, '127.0.0.1', (error) => (error ? reject(error) : resolve(listening)));
  });
  return () =>
    new Promise((resolve) => {
      server.close(() => resolve());
      server.closeAllConnections();
    });
}

function mountClock(app: express.Express, { time, clockChanged, health, pagesUrl }: DeskParts): void {
  const view = () => ({
    domainAt: new Date(time.now()).toISOString(),
    speed: time.speed,
    speeds: SPEEDS,
    pagesUrl,
    ...health(),
  });
  app.get('/desk/api/clock', (_request, response) => void response.json(view()));
  app.post('/desk/api/speed', (request, response) => {
    time.setSpeed(speedBody.parse(request.body).speed);
    clockChanged();
    response.json(view());
  });
}

function mountFloor(app: express.Express, { floor, time }: DeskParts): void {
  app.get('/desk/api/rooms', (_request, response) => void response.json(floor.view()));
  app.post('/desk/api/rooms/:room/push', (request, response) => {
    const found = floor.push(request.params.room, pushBody.parse(request.body).push);
    response
      .status(found ? 200 : 404)
      .json(found ? floor.view() : { error: 'There is no such room in the demo.' });
  });
  app.post('/desk/api/sensors/:device/fault', (request, response) => {
    const { fault } = faultBody.parse(request.body);
    const found = floor.setFault(request.params.device, fault === null ? null : { fault, since: time.now() });
    response
      .status(found ? 200 : 404)
      .json(found ? floor.view() : { error: 'There is no such sensor in the demo.' });
  });
}

function mountMailbox(app: express.Express, { mailbox }: DeskParts): void {
  app.get('/desk/api/messages', (request, response) => {
    const to = request.query['to'];
    response.json(mailbox.mails.filter((mail) => typeof to !== 'string' || mail.to.includes(to)));
  });
  app.delete('/desk/api/messages', (_request, response) => {
    mailbox.clear();
    response.json([]);
  });
}

/** Another site must not steer the demo through a visitor's browser. */
function refuseForeign(request: Request, response: Response, next: NextFunction): void {
  const site = request.get('sec-fetch-site');
  const foreign = site === 'cross-site' || site === 'same-site';
  if (request.method !== 'GET' && (foreign || !request.is('application/json'))) {
    return void response
      .status(403)
      .json({ error: 'Only the desk itself changes the demo, and it sends JSON.' });
  }
  next();
}

function fontFile(): Buffer {
  const path = import.meta
    .resolve('@fontsource/roboto-condensed/files/roboto-condensed-latin-400-normal.woff2');
  return readFileSync(new URL(path));
}
