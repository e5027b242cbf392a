import { dewPoint } from '#shared/air/moist-air';
import type { AlertKind } from '#shared/contract/alerts';
import { may, type Role } from '#shared/contract/roles';
import type { Room, RoomMark, RoomMeasures, RoomSeries as Series, SeriesPoint } from '#shared/contract/rooms';
import { CELL_MS, cellOf, cellStart } from '#shared/cure/grid';
import { type MeasuredCell, measurePeriod } from '#shared/cure/period-measures';
import type { Clock } from '../../clock.js';
import type { CellRun, RoomCellsRepository } from '../../history/room-cells-repository.js';
import { ProblemError } from '../../http/problem-error.js';
import type { StandingBatch } from '../estimates/standing.js';
import { localDays } from './local-days.js';
import { type PooledRow, poolRows } from './pooled-rows.js';
import type { RoomSeriesRepository } from './room-series-repository.js';

export interface RoomSeriesParts {
  readonly repository: RoomSeriesRepository;
  readonly cells: Pick<RoomCellsRepository, 'cells' | 'sensors' | 'rollups'>;
  /** @throws ProblemError not-found for a room of another studio */
  readonly rooms: { get(studioId: string, roomId: string): Promise<Room> };
  readonly standing: { inRoom(roomId: string): StandingBatch[] };
  readonly clock: Clock;
}

export interface Period {
  readonly from: string;
  readonly to: string;
}

const MINUTE_MS = 60_000;
const DAY_MS = 86_400_000;
const MOST_POINTS = 2000;
const MOST_MARKS = 400;
const LONGEST_DAYS = 5 * 366;

/** Which rollups a chart is drawn from: five minutes, an hour, or the studio's local day. */
type RollupLevel = 5 | 60 | 1440;

/** Steps a chart may have, minutes, and the rollups they are made from; a day is the studio's local day. */
const STEPS: readonly { readonly minutes: number; readonly level: RollupLevel }[] = [
  { minutes: 5, level: 5 },
  { minutes: 10, level: 5 },
  { minutes: 30, level: 5 },
  { minutes: 60, level: 60 },
  { minutes: 180, level: 60 },
  { minutes: 360, level: 60 },
  { minutes: 1440, level: 1440 },
];

const ALERT_WORDS: Record<AlertKind, string> = {
  'too-warm': 'Too warm',
  'too-cold': 'Too cold to cure',
  'too-damp': 'Too damp',
  condensation: 'Near condensation',
  swinging: 'Swinging',
  silent: 'Sensor silent',
  stuck: 'Sensor stuck',
  battery: 'Battery low',
  'intake-silent': 'Nothing heard from any sensor',
};

/** A room's past as a chart, and in figures. */
export class RoomSeries {
  constructor(private readonly parts: RoomSeriesParts) {}

  /** The finest step that gives at most 2,000 points, with lowest and highest kept; silence is an empty point. */
  async series(studioId: string, roomId: string, period: Period, role: Role | null): Promise<Series> {
    const room = await this.parts.rooms.get(studioId, roomId);
    const { from, to } = checkedPeriod(period);
    const until = Math.min(to, this.parts.clock.now());
    const step = STEPS.find(({ minutes }) => (to - from) / (minutes * MINUTE_MS) <= MOST_POINTS - 2);
    const { minutes, level } = step ?? { minutes: 1440, level: 1440 as const };
    const points =
      level === 1440
        ? await this.#daily(studioId, roomId, from, until)
        : await this.#stepped(roomId, level, minutes * MINUTE_MS, from, until);
    const recipes = may(role, 'batches.recipe');
    return {
      stepMinutes: minutes,
      points,
      band: { low: room.limits.bandLow, high: room.limits.bandHigh },
      frostingLimits: frostingLimits(this.parts.standing.inRoom(roomId), recipes),
      marks: await this.#marks(roomId, new Date(from), new Date(to), may(role, 'alerts.read')),
    };
  }

  /** What the room has done over a period, from its ten-minute means. */
  async measures(studioId: string, roomId: string, period: Period): Promise<RoomMeasures> {
    const room = await this.parts.rooms.get(studioId, roomId);
    const { from, to } = checkedPeriod(period);
    const timeZone = await this.parts.repository.timeZone(studioId);
    const end = Math.min(cellOf(to), cellOf(this.parts.clock.now()));
    const begin = Math.min(cellOf(from), end);
    const run = (await this.parts.cells.cells([roomId], begin, end)).get(roomId);
    const band = { low: room.limits.bandLow, high: room.limits.bandHigh };
    return { ...period, ...measurePeriod(run ? measuredCells(run, timeZone) : [], band) };
  }

  async #stepped(
    roomId: string,
    level: RollupLevel,
    stepMs: number,
    from: number,
    until: number,
  ): Promise<SeriesPoint[]> {
    const first = Math.floor(from / stepMs) * stepMs;
    const rows = await this.#rows(roomId, level, stepMs / 1000, first, until);
    const byTime = new Map(rows.map((row) => [row.at, row]));
    const points: SeriesPoint[] = [];
    for (let at = first; at < until; at += stepMs) points.push(toPoint(at, byTime.get(at)));
    return points;
  }

  async #daily(studioId: string, roomId: string, from: number, until: number): Promise<SeriesPoint[]> {
    const days = localDays(from, until, await this.parts.repository.timeZone(studioId));
    const first = days[0]?.from ?? from;
    const rows = await this.#rows(roomId, 1440, null, first, until);
    let next = 0;
    return days.map((day) => {
      while ((rows[next]?.at ?? Infinity) < day.from) next++;
      const row = rows[next];
      return toPoint(day.from, row && row.at < day.to ? row : undefined);
    });
  }

  async #rows(
    roomId: string,
    level: RollupLevel,
    stepSeconds: number | null,
    from: number,
    to: number,
  ): Promise<PooledRow[]> {
    const sensors = await this.parts.cells.sensors([roomId]);
    return poolRows(await this.parts.cells.rollups(sensors, level, stepSeconds, from, to));
  }

  async #marks(roomId: string, from: Date, to: Date, withAlerts: boolean): Promise<RoomMark[]> {
    const { repository } = this.parts;
    const alerts = withAlerts ? await repository.alerts(roomId, from, to, MOST_MARKS) : [];
    const stays = await repository.stays(roomId, from, to, MOST_MARKS);
    const within = (at: Date | null): at is Date => at !== null && at >= from && at < to;
    const arrivals = new Set(stays.map((stay) => momentOf(stay.batchId, stay.from)));
    const departures = new Set(stays.map((stay) => momentOf(stay.batchId, stay.to)));
    const marks: RoomMark[] = alerts.map((alert) => ({
      kind: 'alert',
      from: alert.from.toISOString(),
      to: alert.to?.toISOString() ?? null,
      text: ALERT_WORDS[alert.kind],
      batchId: null,
      alertId: alert.id,
    }));
    for (const { batchId, code, pouredAt, from: came, to: left } of stays) {
      const mark = (kind: RoomMark['kind'], at: Date, text: string) =>
        marks.push({ kind, text, batchId, from: at.toISOString(), to: null, alertId: null });
      // From one shelf to another of the same room is no move in or out of it.
      if (within(left) && !arrivals.has(momentOf(batchId, left))) mark('move-out', left, `${code} left`);
      if (!within(came) || departures.has(momentOf(batchId, came))) continue;
      if (came.getTime() === pouredAt.getTime()) mark('pour', came, `${code} poured and placed here`);
      else mark('move-in', came, `${code} moved in`);
    }
    // Sorting is stable: of two moves at the same time, the one out comes first.
    return marks
      .sort((a, b) => Number(b.kind === 'move-out') - Number(a.kind === 'move-out'))
      .sort((a, b) => Date.parse(a.from) - Date.parse(b.from));
  }
}

function momentOf(batchId: string, at: Date | null): string {
  return `${batchId} ${at?.getTime() ?? ''}`;
}

/** @throws ProblemError bad-input unless the period begins before it ends and is at most five years long */
export function checkedPeriod(period: Period): { from: number; to: number } {
  const [from, to] = [Date.parse(period.from), Date.parse(period.to)];
  const fault =
    from >= to
      ? 'The period must begin before it ends.'
      : to - from > LONGEST_DAYS * DAY_MS
        ? 'Choose a period of five years at most.'
        : null;
  if (fault !== null) throw new ProblemError('bad-input', fault, [{ path: 'from', message: fault }]);
  return { from, to };
}

/** The cells of a run, each with the local day of the studio in which it begins. */
export function measuredCells(run: CellRun, timeZone: string): MeasuredCell[] {
  const end = run.fromCell + run.celsius.length;
  const days = localDays(cellStart(run.fromCell), cellStart(end), timeZone);
  let day = 0;
  return Array.from(run.celsius, (celsius, index) => {
    const at = (run.fromCell + index) * CELL_MS;
    while ((days[day]?.to ?? Infinity) <= at) day++;
    return {
      celsius: valueOrNull(celsius),
      humidity: valueOrNull(run.humidity[index] ?? Number.NaN),
      day: days[day]?.date ?? '',
    };
  });
}

function valueOrNull(value: number): number | null {
  return Number.isNaN(value) ? null : value;
}

function toPoint(at: number, row: PooledRow | undefined): SeriesPoint {
  const nothing = { t: null, tMin: null, tMax: null, rh: null, rhMin: null, rhMax: null };
  const { t, tMin, tMax, rh, rhMin, rhMax } = row ?? nothing;
  return {
    at: new Date(at).toISOString(),
    ...{ t, tMin, tMax, rh, rhMin, rhMax },
    dewPoint: t === null || rh === null ? null : dewPoint(t, rh),
  };
}

function frostingLimits(standing: readonly StandingBatch[], recipes: boolean): Series['frostingLimits'] {
  const limits = new Map<number, { families: Set<string>; codes: string[] }>();
  for (const { frostingFrom, waxFamily, code } of standing) {
    if (frostingFrom === null) continue;
    const limit = limits.get(frostingFrom) ?? { families: new Set(), codes: [] };
    if (recipes) limit.families.add(waxFamily);
    limit.codes.push(code);
    limits.set(frostingFrom, limit);
  }
  return [...limits]
    .sort(([a], [b]) => a - b)
    .map(([celsius, { families, codes }]) => ({
      celsius,
      waxFamilies: [...families].sort(),
      batches: codes.sort(),
    }));
}
