import type { AlertFacts, AlertKind, Rule, Severity } from '#shared/contract/alerts';
import type { RoomNow } from '#shared/contract/overview';
import type { RoomLimits } from '#shared/contract/rooms';
import type { StandingBatch } from '../estimates/standing.js';
import type { RuleSample } from './rule-machine.js';

/** Everything the rules of a room look at. */
export interface RoomPicture {
  readonly limits: RoomLimits;
  readonly now: RoomNow;
  readonly standing: readonly StandingBatch[];
  /** Highest less lowest ten-minute mean of the last 24 h, K; null without readings. */
  readonly swing: number | null;
  /** Lowest ten-minute mean of the last three hours, °C: wax and glass lag behind the air. */
  readonly coldest: number | null;
}

/** What a rule found: its sample and, should it be raised, the figures of its facts. */
export interface Finding {
  readonly sample: RuleSample;
  readonly limit: number | null;
  readonly dewPoint: number | null;
  readonly celsius: number | null;
  readonly batches: AlertFacts['batches'];
}

/** Above its limit by this much heat is critical, K. Common practice, no source. */
const CRITICAL_HEAT = 3;
/** A surface closer to the dew point than this is near condensation, K. */
const CONDENSATION_MARGIN = 1;

/** Rules about a room's air, by kind. */
export const ROOM_KINDS = ['too-warm', 'too-cold', 'too-damp', 'condensation', 'swinging'] as const;
export type RoomKind = (typeof ROOM_KINDS)[number];

/** Looks at a room with one of its rules. @param at epoch ms of the newest reading the picture is made of */
export function lookAtRoom(kind: RoomKind, rule: Rule, picture: RoomPicture, at: number): Finding {
  if (picture.now.stale || picture.now.celsius === null) {
    return finding(sample(at, 'no-data', rule.severity, null, 'higher'), null, [], picture);
  }
  switch (kind) {
    case 'too-warm':
      return tooWarm(rule, picture, picture.now.celsius, at);
    case 'too-cold':
      return tooCold(rule, picture, picture.now.celsius, at);
    case 'too-damp':
      return against(rule, picture, at, picture.now.humidity, picture.limits.humidityHigh);
    case 'condensation':
      return condensation(rule, picture, at);
    case 'swinging':
      return against(rule, picture, at, picture.swing, picture.limits.swingLimit);
  }
}

/** The limit comes from the waxes that stand in the room and from the room itself, whichever is lower. */
function tooWarm(rule: Rule, picture: RoomPicture, celsius: number, at: number): Finding {
  const limit = picture.now.heatLimit;
  if (limit === null) return finding(sample(at, 'good', rule.severity, celsius, 'higher'), null, [], picture);
  const severity: Severity = celsius >= limit + CRITICAL_HEAT ? 'critical' : rule.severity;
  const touched = picture.standing.filter(
    ({ frostingFrom }) => frostingFrom !== null && celsius > frostingFrom,
  );
  return finding(
    sample(at, side(celsius, limit, limit - rule.clearBy), severity, celsius, 'higher'),
    limit,
    touched,
    picture,
  );
}

/** Too cold is a matter of dates: how many days they slip should the room stay as it is. */
function tooCold(rule: Rule, picture: RoomPicture, celsius: number, at: number): Finding {
  const { bandLow, slipDays } = picture.limits;
  const slipping = picture.standing.filter(({ slipIfItStaysDays }) => (slipIfItStaysDays ?? 0) > slipDays);
  const slip = Math.max(0, ...picture.standing.map(({ slipIfItStaysDays }) => slipIfItStaysDays ?? 0));
  const status =
    celsius < bandLow && slipping.length > 0
      ? 'bad'
      : celsius >= bandLow + rule.clearBy || slip === 0
        ? 'good'
        : 'between';
  return finding(sample(at, status, rule.severity, slip, 'higher'), slipDays, slipping, picture);
}

/** Without a probe on the wax its surface is taken to lag behind the air: the coldest the room was in three hours. */
function condensation(rule: Rule, picture: RoomPicture, at: number): Finding {
  const { dewPoint, celsius } = picture.now;
  if (dewPoint === null || celsius === null) {
    return finding(sample(at, 'no-data', rule.severity, null, 'lower'), null, [], picture);
  }
  const surface = Math.min(celsius, picture.coldest ?? celsius);
  const margin = surface - dewPoint;
  const status =
    margin < CONDENSATION_MARGIN ? 'bad' : margin >= CONDENSATION_MARGIN + rule.clearBy ? 'good' : 'between';
  return finding(
    sample(at, status, rule.severity, surface, 'lower'),
    dewPoint + CONDENSATION_MARGIN,
    picture.standing,
    picture,
  );
}

function against(rule: Rule, picture: RoomPicture, at: number, value: number | null, limit: number): Finding {
  const status = value === null ? 'no-data' : side(value, limit, limit - rule.clearBy);
  return finding(sample(at, status, rule.severity, value, 'higher'), limit, picture.standing, picture);
}

function side(value: number, limit: number, clear: number): 'bad' | 'good' | 'between' {
  if (value > limit) return 'bad';
  return value <= clear ? 'good' : 'between';
}

function sample(
  at: number,
  status: RuleSample['status'],
  severity: Severity,
  value: number | null,
  worse: RuleSample['worse'],
): RuleSample {
  return { at, status, severity, value, worse };
}

function finding(
  ruleSample: RuleSample,
  limit: number | null,
  batches: readonly StandingBatch[],
  picture: RoomPicture,
): Finding {
  return {
    sample: ruleSample,
    limit,
    dewPoint: picture.now.dewPoint,
    celsius: picture.now.celsius,
    batches: batches.map(({ id, code, waxFamily, shelf }) => ({ id, code, waxFamily, shelf })),
  };
}

/** What is known of a sensor by the rules that look at sensors. */
export interface SensorPicture {
  readonly lastHeardAt: number | null;
  readonly staleAfterMs: number;
  readonly battery: number | null;
  readonly stuckAtCelsius: number | null;
  /** All sensors of the studio are silent: one alert speaks for them. */
  readonly covered: boolean;
}

const LOW_BATTERY = 15;

/** Looks at a sensor with one of its rules; a sensor that was never heard is being set up and raises nothing. */
export function lookAtSensor(
  kind: Extract<AlertKind, 'silent' | 'stuck' | 'battery'>,
  rule: Rule,
  picture: SensorPicture,
  now: number,
): { sample: RuleSample; limit: number | null } {
  if (picture.lastHeardAt === null || picture.covered) {
    return { sample: sample(now, 'no-data', rule.severity, null, 'lower'), limit: null };
  }
  const silent = now - picture.lastHeardAt > picture.staleAfterMs;
  if (kind === 'silent') {
    return { sample: sample(now, silent ? 'bad' : 'good', rule.severity, null, 'lower'), limit: null };
  }
  if (silent) return { sample: sample(now, 'no-data', rule.severity, null, 'lower'), limit: null };
  if (kind === 'stuck') {
    const status = picture.stuckAtCelsius === null ? 'good' : 'bad';
    return { sample: sample(now, status, rule.severity, picture.stuckAtCelsius, 'higher'), limit: null };
  }
  const { battery } = picture;
  const status =
    battery === null
      ? 'no-data'
      : battery < LOW_BATTERY
        ? 'bad'
        : battery >= LOW_BATTERY + rule.clearBy
          ? 'good'
          : 'between';
  return { sample: sample(now, status, rule.severity, battery, 'lower'), limit: LOW_BATTERY };
}
