import { plainReading, PLAUSIBLE, senmlPack, type SenmlRecord } from '#shared/contract/telemetry';
import { fromKelvin } from '#shared/units/temperature';
import { z } from 'zod';

/** A reading as a device sent it, checked for plausibility. */
export interface ParsedReading {
  readonly celsius: number;
  readonly humidity: number | null;
  readonly battery: number | null;
  /** Device time in epoch ms; null: the device has no clock. */
  readonly at: number | null;
  /** Makes a reading without a clock recognisable when it is sent again. */
  readonly sequence: { readonly boot: number; readonly seq: number } | null;
}

/** What a payload came to: readings, and for the rest a sentence of why it could not be taken. */
export interface ParsedPayload {
  readonly readings: readonly ParsedReading[];
  readonly faults: readonly string[];
}

export const LARGEST_PAYLOAD_BYTES = 64 * 1024;
const MOST_READINGS = 500;
/** RFC 8428 §4.5.3: smaller times are relative to now. */
const SENML_ABSOLUTE_FROM = 2 ** 28;
/** An epoch in milliseconds instead of seconds lies beyond the year 5000. */
const LATEST_SECONDS = 1e11;

const plainPayload = z.union([plainReading, z.array(plainReading).min(1).max(MOST_READINGS)]);

/**
 * Reads a payload: plain JSON (one reading or an array) or a SenML pack (RFC 8428). Never throws: what cannot be taken
 * is named in `faults`, the rest is taken.
 * @param now time of receipt, epoch ms; SenML times may be relative to it
 */
export function parsePayload(payload: Uint8Array, now: number): ParsedPayload {
  if (payload.length > LARGEST_PAYLOAD_BYTES) {
    return refused(`The message has ${payload.length} bytes; ${LARGEST_PAYLOAD_BYTES} are taken at most.`);
  }
  let json: unknown;
  try {
    json = JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(payload));
  } catch {
    return refused('The message is not valid JSON in UTF-8.');
  }
  return looksLikeSenml(json) ? parseSenml(json, now) : parsePlain(json);
}

function refused(fault: string): ParsedPayload {
  return { readings: [], faults: [fault] };
}

/** SenML records are objects that name a unit or a record; plain readings have t without either. */
function looksLikeSenml(json: unknown): boolean {
  if (!Array.isArray(json)) return false;
  const first: unknown = json[0];
  return (
    typeof first === 'object' &&
    first !== null &&
    ['bn', 'n', 'bu', 'u', 'v', 'vs', 'vb', 'vd', 'bver', 'bt', 'bv', 's', 'bs'].some((key) => key in first)
  );
}

function parsePlain(json: unknown): ParsedPayload {
  const parsed = plainPayload.safeParse(json);
  if (!parsed.success) {
    return refused(
      'The message is neither a reading such as {"t": 21.4, "rh": 48.2, "at": "2026-05-01T10:00:00Z"}, nor an array of up to 500, nor SenML.',
    );
  }
  const readings: ParsedReading[] = [];
  const faults: string[] = [];
  for (const one of Array.isArray(parsed.data) ? parsed.data : [parsed.data]) {
    const at = one.at === undefined ? null : epochOf(one.at);
    const sequence =
      one.boot === undefined || one.seq === undefined ? null : { boot: one.boot, seq: one.seq };
    if (typeof at === 'string') faults.push(at);
    else
      take(readings, faults, {
        celsius: one.t,
        humidity: one.rh ?? null,
        battery: one.bat ?? null,
        at,
        sequence,
      });
  }
  return { readings, faults };
}

function epochOf(at: string | number): number | string {
  if (typeof at === 'string') return Date.parse(at);
  if (at > LATEST_SECONDS)
    return `The time ${at} looks like milliseconds; send seconds since 1970 or ISO 8601.`;
  if (at < 0) return `The time ${at} lies before 1970.`;
  return Math.round(at * 1000);
}

function take(readings: ParsedReading[], faults: string[], reading: ParsedReading): void {
  const fault = implausible(reading);
  if (fault === null) readings.push(reading);
  else faults.push(fault);
}

/** Written so that NaN is refused. */
function implausible({ celsius, humidity, at }: ParsedReading): string | null {
  const t = PLAUSIBLE.celsius;
  const rh = PLAUSIBLE.humidity;
  if (!(celsius >= t.min && celsius <= t.max)) {
    return `${celsius} °C is not plausible in a room (${t.min} to ${t.max} °C).`;
  }
  if (humidity !== null && !(humidity >= rh.min && humidity <= rh.max)) {
    return `${humidity} % humidity is not possible.`;
  }
  if (at !== null && !(at >= 0 && at < 253_402_300_800_000))
    return 'The time is not a date between 1970 and 9999.';
  return null;
}

interface SenmlValue {
  readonly at: number | null;
  celsius: number | null;
  humidity: number | null;
  battery: number | null;
}

/** Resolves a pack (RFC 8428 §4.6): base fields carry over to later records, values of one time become one reading. */
function parseSenml(json: unknown, now: number): ParsedPayload {
  const pack = senmlPack.safeParse(json);
  if (!pack.success) return refused('The SenML pack is not well formed (RFC 8428).');
  const faults: string[] = [];
  const values = new Map<string, SenmlValue>();
  const base = { time: 0, unit: undefined as string | undefined, value: 0, hasTime: false };
  for (const record of pack.data) {
    if (record.bver !== undefined && record.bver !== 10) {
      return refused(`SenML version ${record.bver} is not known; 10 is (RFC 8428).`);
    }
    const unknown = Object.keys(record).find((key) => key.endsWith('_'));
    if (unknown) return refused(`The SenML field ${unknown} must be understood, and it is not known here.`);
    if (record.bt !== undefined) [base.time, base.hasTime] = [record.bt, true];
    if (record.bu !== undefined) base.unit = record.bu;
    if (record.bv !== undefined) base.value = record.bv;
    if (record.v === undefined) {
      const fault = withoutValue(record);
      if (fault) faults.push(fault);
      continue;
    }
    const hasTime = base.hasTime || record.t !== undefined;
    const seconds = base.time + (record.t ?? 0);
    const at = !hasTime
      ? null
      : Math.round(seconds >= SENML_ABSOLUTE_FROM ? seconds * 1000 : now + seconds * 1000);
    const value = values.get(String(at)) ?? { at, celsius: null, humidity: null, battery: null };
    const fault = place(value, record.u ?? base.unit, base.value + record.v);
    if (fault) faults.push(fault);
    else values.set(String(at), value);
  }
  const readings: ParsedReading[] = [];
  for (const { at, celsius, humidity, battery } of values.values()) {
    if (celsius === null) faults.push('A SenML reading without a temperature (unit Cel or K) is not taken.');
    else take(readings, faults, { celsius, humidity, battery, at, sequence: null });
  }
  if (readings.length > MOST_READINGS) return refused(`A message holds ${MOST_READINGS} readings at most.`);
  return { readings, faults };
}

function withoutValue(record: SenmlRecord): string | null {
  if (record.s !== undefined) return 'A SenML sum (s) is no reading of a room.';
  if (record.vs !== undefined || record.vb !== undefined || record.vd !== undefined) {
    return 'A SenML record with text, truth or data instead of a number is not taken.';
  }
  // A record of base fields alone is allowed.
  return record.n !== undefined || record.u !== undefined
    ? 'A SenML record without a value is not taken.'
    : null;
}

/** Puts a value where its unit belongs (units of RFC 8428 §12.1). */
function place(into: SenmlValue, unit: string | undefined, value: number): string | null {
  switch (unit) {
    case 'Cel':
      into.celsius = value;
      return null;
    case 'K':
      into.celsius = fromKelvin(value);
      return null;
    case '%RH':
      into.humidity = value;
      return null;
    case '%EL':
      into.battery = value;
      return null;
    case undefined:
      return 'A SenML record without a unit is not taken; send Cel, K, %RH or %EL.';
    default:
      return `The SenML unit ${unit} is not taken; send Cel, K, %RH or %EL.`;
  }
}
