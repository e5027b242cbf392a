import type { EnrolOptions } from './options.js';
import { RecordingError } from './recording.js';

/** An enrolled device ready to send. */
export interface ReadyDevice {
  readonly deviceId: string;
  readonly secret: string;
  readonly topic: string;
}

interface Named {
  readonly id: string;
  readonly name: string;
}

/** Recordings may be as old as they are. */
const ACCEPT_LATE_DAYS = 36_500;

/**
 * Enrols a sensor for every name, through the API like a lead would, in one room or in a new room each.
 * @param intervalSeconds seconds between readings of the recording
 * @throws RecordingError with the API's own sentence
 */
export async function enrolDevices(
  options: EnrolOptions,
  names: readonly string[],
  intervalSeconds: number,
): Promise<Map<string, ReadyDevice>> {
  const signedIn = await call<{ accessToken: string }>(options, 'POST', '/api/sign-in', null, {
    email: options.email,
    password: options.password,
  });
  const token = signedIn.accessToken;
  const studio = pick(await call<Named[]>(options, 'GET', '/api/studios', token), options.studio, 'studio');
  const rooms = await call<Named[]>(options, 'GET', `/api/studios/${studio.id}/rooms`, token);
  const devices = new Map<string, ReadyDevice>();
  for (const name of names) {
    const room =
      options.room === null
        ? await newRoom(options, token, studio.id, name)
        : pick(rooms, options.room, 'room');
    const { sensor, secret } = await call<{ sensor: { deviceId: string; topic: string }; secret: string }>(
      options,
      'POST',
      `/api/studios/${studio.id}/sensors`,
      token,
      {
        ...{ roomId: room.id, name: `Replay ${name}`, acceptLateDays: ACCEPT_LATE_DAYS },
        intervalSeconds: Math.min(86_400, Math.max(1, Math.round(intervalSeconds))),
      },
    );
    devices.set(name, { deviceId: sensor.deviceId, secret, topic: sensor.topic });
  }
  return devices;
}

function newRoom(options: EnrolOptions, token: string, studioId: string, name: string): Promise<Named> {
  return call<Named>(options, 'POST', `/api/studios/${studioId}/rooms`, token, {
    name: `Replay ${name}`,
    limits: { bandLow: 18, bandHigh: 23, heatLimit: null, humidityHigh: 65, swingLimit: 5, slipDays: 2 },
  });
}

function pick(things: readonly Named[], name: string, what: string): Named {
  const found = things.find((thing) => thing.name.toLowerCase() === name.toLowerCase());
  if (found) return found;
  throw new RecordingError(
    `There is no ${what} "${name}". Known are: ${things.map((thing) => thing.name).join(', ')}.`,
  );
}

async function call<T>(
  { url }: EnrolOptions,
  method: string,
  path: string,
  token: string | null,
  body?: object,
): Promise<T> {
  const answer = await fetch(`${url}${path}`, {
    method,
    headers: {
      ...(body === undefined ? {} : { 'Content-Type': 'application/json' }),
      ...(token === null ? {} : { Authorization: `Bearer ${token}` }),
    },
    ...(body === undefined ? {} : { body: JSON.stringify(body) }),
  }).catch((error: unknown) => {
    throw new RecordingError(`${url} does not answer (${String(error)}). Is Stillroom running?`);
  });
  const reply: unknown = await answer.json();
  if (!answer.ok)
    throw new RecordingError((reply as { detail?: string }).detail ?? `${path} answered ${answer.status}.`);
  return reply as T;
}
