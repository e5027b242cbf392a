import { readFileSync } from 'node:fs';
import { gunzipSync } from 'node:zlib';
import { connectAsync, type MqttClient } from 'mqtt';
import { readingTopic } from '#shared/contract/telemetry';
import { enrolDevices, type ReadyDevice } from './replay/enrol.js';
import { HELP, OptionsError, readOptions, type ReplayOptions } from './replay/options.js';
import { Progress } from './replay/progress.js';
import { type RecordedReading, type Recording, RecordingError, readRecording } from './replay/recording.js';

/** Command: replays a recording over MQTT. See HELP. */
const READINGS_A_MESSAGE = 200;
const MESSAGES_UNDER_WAY = 4;
const FAULTS_SHOWN = 10;

let cancelled = false;
process.on('SIGINT', () => {
  if (cancelled) process.exit(130);
  cancelled = true;
  console.error('\nStopping after what is under way. Once more to stop at once.');
});

try {
  if (process.argv.includes('--help')) console.log(HELP);
  else await replay(readOptions(process.argv.slice(2), process.env));
} catch (error) {
  const expected = error instanceof OptionsError || error instanceof RecordingError;
  console.error(expected ? error.message : error);
  process.exitCode = 1;
}

async function replay(options: ReplayOptions): Promise<void> {
  const recording = readRecording(textOf(options.file), options.format, options.devices);
  tellFaults(recording);
  const byDevice = new Map(options.devices.map(({ deviceId }) => [deviceId, [] as RecordedReading[]]));
  for (const reading of recording.readings) byDevice.get(reading.deviceId)?.push(reading);
  const devices = await readyDevices(options, intervalOf(byDevice));
  for (const [name, { deviceId, topic }] of devices) console.log(`${name} sends as ${deviceId} on ${topic}`);
  const start = recording.readings.reduce((first, { at }) => Math.min(first, at), Infinity);
  const progress = new Progress(recording.readings.length);
  await Promise.all(
    [...byDevice].map(async ([name, readings]) => {
      const device = devices.get(name);
      if (device) await sendAll(options, device, readings, start, progress);
    }),
  );
  progress.end();
  if (cancelled) process.exitCode = 130;
}

function textOf(file: string): string {
  try {
    const bytes = readFileSync(file);
    return (file.endsWith('.gz') ? gunzipSync(bytes) : bytes).toString('utf8');
  } catch (error) {
    throw new RecordingError(
      `${file} cannot be read: ${error instanceof Error ? error.message : String(error)}`,
    );
  }
}

function tellFaults({ faults, rows }: Recording): void {
  if (faults.length === 0) return;
  console.error(`${faults.length} of ${rows} rows are left out:`);
  for (const { line, why } of faults.slice(0, FAULTS_SHOWN)) console.error(`  line ${line}: ${why}`);
  if (faults.length > FAULTS_SHOWN) console.error(`  and ${faults.length - FAULTS_SHOWN} more`);
}

/** Median seconds between readings of a device. */
function intervalOf(byDevice: ReadonlyMap<string, readonly RecordedReading[]>): number {
  const [readings = []] = byDevice.values();
  const steps = readings.slice(1).map(({ at }, index) => at - (readings[index]?.at ?? at));
  steps.sort((a, b) => a - b);
  return (steps[steps.length >> 1] ?? 60_000) / 1000;
}

async function readyDevices(
  options: ReplayOptions,
  intervalSeconds: number,
): Promise<Map<string, ReadyDevice>> {
  const names = options.devices.map(({ deviceId }) => deviceId);
  if (options.enrol) return enrolDevices(options.enrol, names, intervalSeconds);
  return new Map(
    names.map((deviceId) => [
      deviceId,
      {
        deviceId,
        secret: options.secrets.get(deviceId) ?? '',
        topic: readingTopic(options.studioId ?? '', deviceId),
      },
    ]),
  );
}

async function sendAll(
  options: ReplayOptions,
  device: ReadyDevice,
  readings: readonly RecordedReading[],
  start: number,
  progress: Progress,
): Promise<void> {
  const client = await connectAsync(options.mqttUrl, {
    clientId: device.deviceId,
    username: device.deviceId,
    password: device.secret,
    reconnectPeriod: 500,
    clean: false,
  }).catch((error: unknown) => {
    throw new RecordingError(`${device.deviceId} was not let in by ${options.mqttUrl}: ${String(error)}`);
  });
  const began = performance.now();
  const underWay = new Set<Promise<void>>();
  for (let at = 0; at < readings.length && !cancelled;) {
    const part = nextPart(options.speed, readings, at);
    at += part.length;
    if (options.speed !== null) await until(began + ((part[0]?.at ?? start) - start) / options.speed);
    const sending = publish(client, device.topic, part).then(() => {
      progress.add(part.length);
      underWay.delete(sending);
    });
    underWay.add(sending);
    if (underWay.size >= MESSAGES_UNDER_WAY) await Promise.race(underWay);
  }
  await Promise.all(underWay);
  await client.endAsync();
}

/** At a speed every reading is a message of its own; otherwise many are one. */
function nextPart(
  speed: number | null,
  readings: readonly RecordedReading[],
  at: number,
): readonly RecordedReading[] {
  return readings.slice(at, at + (speed === null ? READINGS_A_MESSAGE : 1));
}

function publish(client: MqttClient, topic: string, readings: readonly RecordedReading[]): Promise<unknown> {
  const payload = readings.map(({ celsius, humidity, at }) => ({
    t: celsius,
    ...(humidity === null ? {} : { rh: humidity }),
    at: new Date(at).toISOString(),
  }));
  return client.publishAsync(topic, JSON.stringify(payload), { qos: 1 });
}

async function until(instant: number): Promise<void> {
  const wait = instant - performance.now();
  if (wait > 0) await new Promise((resolve) => setTimeout(resolve, wait));
}
