import { existsSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { createReadStream } from 'node:fs';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { z } from 'zod';
import { demoScenario } from '#shared/contract/demo-scenario';
import { DemoTime } from './demo-time.js';
import { startDesk } from './desk/desk.js';
import { deviceFile, Devices } from './devices.js';
import { keptFloor, SimulatedFloor } from './floor.js';
import { Mailbox } from './mailbox.js';
import { DEMO_INTERVAL_SECONDS } from './scenario/places.js';
import { readSimulatorSettings } from './settings.js';

/** Command: plays the demo. Sends every sensor's readings by MQTT, receives the mails, serves the demo desk. */
const settings = readSimulatorSettings(process.env);
const file = (name: string) => join(settings.folder, name);
const memory = z.object({ domainAt: z.number(), speed: z.number(), floor: keptFloor });

const TICK_MS = 250;
const TELL_CLOCK_MS = 10_000;
const KEEP_MS = 2000;
const INTERVAL_MS = DEMO_INTERVAL_SECONDS * 1000;
/** At high speed a device sends fewer readings rather than more than this a tick. */
const MOST_A_TICK = 30;
/** Time in which nobody simulated is filled up to this far back, ten minutes apart. */
const LONGEST_BACKLOG_MS = 6 * 86_400_000;
const BACKLOG_STEP_MS = 600_000;

const story = await storyInstant();
const kept = existsSync(file('memory.json'))
  ? memory.safeParse(JSON.parse(readFileSync(file('memory.json'), 'utf8')))
  : null;
const last = kept?.success ? kept.data.domainAt : story;
const time = new DemoTime(Math.max(last, Date.now()), 1, () => Date.now());
const floor = new SimulatedFloor(
  story,
  Math.max(last, time.now() - LONGEST_BACKLOG_MS),
  kept?.success ? kept.data.floor : null,
);
const devices = new Devices(
  settings.mqttUrl,
  deviceFile.parse(JSON.parse(readFileSync(file('devices.json'), 'utf8'))),
  settings.secret,
  () => time.setting,
);
const mailbox = new Mailbox();
await mailbox.start(settings.smtpPort);
const closeDesk = await startDesk(settings.deskPort, {
  time,
  floor,
  mailbox,
  pagesUrl: settings.pagesUrl,
  clockChanged: () => devices.tellClock(),
  health: () => ({ devices: devices.connected, waiting: devices.waiting }),
});

let sentTo = Math.max(last, time.now() - LONGEST_BACKLOG_MS);
send(BACKLOG_STEP_MS, time.now() - INTERVAL_MS);
const ticking = setInterval(() => send(stepFor(time.now()), time.now()), TICK_MS);
const telling = setInterval(() => devices.tellClock(), TELL_CLOCK_MS);
const keeping = setInterval(keep, KEEP_MS);
console.log(`The simulator runs. Demo desk: http://127.0.0.1:${settings.deskPort}`);

let stopping = false;
for (const signal of ['SIGTERM', 'SIGINT'] as const) process.on(signal, () => void stop());

/** Sends the readings of every sensor from the last instant sent up to `until`. */
function send(step: number, until: number): void {
  const instants: number[] = [];
  while (sentTo + step <= until) instants.push((sentTo += step));
  if (instants.length === 0) return;
  for (const [deviceId, readings] of floor.readingsAt(instants)) devices.send(deviceId, readings);
}

function stepFor(now: number): number {
  return Math.max(INTERVAL_MS, Math.ceil((now - sentTo) / MOST_A_TICK / INTERVAL_MS) * INTERVAL_MS);
}

/** Written beside and renamed: a kill in between leaves the old one. */
function keep(): void {
  const text = JSON.stringify({ domainAt: sentTo, speed: time.speed, floor: floor.kept } satisfies z.infer<
    typeof memory
  >);
  writeFileSync(file('memory.new'), text);
  renameSync(file('memory.new'), file('memory.json'));
}

async function stop(): Promise<void> {
  if (stopping) return;
  stopping = true;
  for (const timer of [ticking, telling, keeping]) clearInterval(timer);
  keep();
  await Promise.all([devices.stop(), mailbox.stop(), closeDesk()]);
  process.exit(0);
}

/** The instant the story is told at stands in the first line of the scenario. */
async function storyInstant(): Promise<number> {
  const stream = createReadStream(file('scenario.jsonl'), 'utf8');
  for await (const line of createInterface(stream)) {
    stream.destroy();
    return Date.parse(demoScenario.parse(JSON.parse(line)).now);
  }
  throw new Error(`${file('scenario.jsonl')} is empty. Start the demo over with npm run demo:reset.`);
}
