import type { Alert } from '#shared/contract/alerts';
import type { BatchCard } from '#shared/contract/batches';
import type { RoomNow } from '#shared/contract/overview';
import type { Rack } from '#shared/contract/racks';
import { rackReadiness, type RackReadiness } from '#shared/words/rack-readiness';
import { alertPlace, alertWords } from '#shared/words/alert-words';
import { list } from '#shared/words/lists';
import type { StudioFormats } from '../../core/time/studio-formats';
import { ALERT_STATUS } from '../../ui/alert-status';
import type { Status } from '../../ui/status-mark';

/** One thing that needs somebody now. */
export interface NeedLine {
  readonly id: string;
  readonly status: Status;
  /** What is the matter, in bold. */
  readonly lead: string;
  readonly rest: string;
  /** Whose it is. */
  readonly who: string;
  readonly link: readonly string[];
}

export interface NeedRoom {
  readonly id: string;
  readonly name: string;
  /** The last known reading of a room gone silent; null while it is heard. */
  readonly silence: Pick<RoomNow, 'at' | 'celsius'> | null;
  readonly racks: readonly Rack[];
  readonly batches: readonly BatchCard[];
}

export interface NeedStudio {
  readonly id: string;
  readonly name: string;
  readonly formats: StudioFormats;
  readonly rooms: readonly NeedRoom[];
  readonly batches: readonly BatchCard[];
  readonly alerts: readonly Alert[];
  /** Whether the person has to do with tests here; a viewer only reads what is ready. */
  readonly tests: boolean;
}

const WEIGHT = { critical: 0, warning: 1, notice: 2 } as const;

/**
 * What is wrong now, the most pressing first: alerts, then rooms gone silent.
 * @param now epoch ms
 */
export function troubles(studios: readonly NeedStudio[], now: number): NeedLine[] {
  return [
    ...studios
      .flatMap((studio) => studio.alerts.map((alert) => ({ studio, alert })))
      .filter(({ alert }) => alert.shelved === null)
      .sort(
        (a, b) =>
          WEIGHT[a.alert.facts.severity] - WEIGHT[b.alert.facts.severity] ||
          a.alert.raisedAt.localeCompare(b.alert.raisedAt),
      )
      .map(({ studio, alert }) => ofAlert(studio, alert, now)),
    ...studios.flatMap((studio) => silentRooms(studio, now)),
  ];
}

/**
 * Work that is due today: racks that are or will be ready, then tests.
 * @param now epoch ms
 */
export function workDue(studios: readonly NeedStudio[], now: number): NeedLine[] {
  return [
    ...studios.flatMap((studio) => racksReadyToday(studio, now)),
    ...studios.flatMap((studio) => (studio.tests ? testsDue(studio) : [])),
  ];
}

function ofAlert(studio: NeedStudio, alert: Alert, now: number): NeedLine {
  const { headline, figures } = alertWords(alert.facts, studio.formats, now);
  const rest = alert.state === 'returned' ? 'over, but nobody acknowledged it.' : figures;
  const matter =
    alert.facts.sensorName === null ? headline.charAt(0).toLowerCase() + headline.slice(1) : headline;
  const holder = alert.holder?.name ?? 'nobody yet';
  return {
    id: alert.id,
    status: ALERT_STATUS[alert.facts.kind],
    lead: `${alertPlace(alert.facts)}: ${matter}${rest === '' ? '' : ':'}`,
    rest,
    who: alert.acknowledged === null && alert.holder !== null ? `${holder}, not yet acknowledged` : holder,
    link: ['/alerts', alert.id],
  };
}

/** Rooms gone silent whose alert is not raised yet, or may not be read. */
function silentRooms(studio: NeedStudio, now: number): NeedLine[] {
  return studio.rooms
    .filter(
      ({ id, silence }) =>
        silence !== null && !studio.alerts.some((alert) => alert.roomId === id && isSilence(alert)),
    )
    .map((room) => ({
      id: `silent ${room.id}`,
      status: 'silent',
      lead: `${studio.name}, ${room.name} is silent`,
      rest: lastHeard(room, studio.formats, now),
      who: 'nobody yet',
      link: ['/rooms', room.id],
    }));
}

function isSilence(alert: Alert): boolean {
  return alert.facts.kind === 'silent' || alert.facts.kind === 'intake-silent';
}

function lastHeard({ silence, batches }: NeedRoom, formats: StudioFormats, now: number): string {
  if (!silence || silence.at === null || silence.celsius === null) return '';
  const ago = `last ${formats.temperature(silence.celsius)}, ${formats.duration(now - Date.parse(silence.at))} ago`;
  return batches.length > 0 ? `${ago}; dates there widen by the hour` : ago;
}

function racksReadyToday(studio: NeedStudio, now: number): NeedLine[] {
  const { formats } = studio;
  return studio.rooms.flatMap((room) =>
    rackReadiness(room.racks, room.batches).flatMap((one) => {
      const at = one.readySince ?? one.expected?.t50;
      if (at === undefined) return [];
      const day = formats.daySeenFrom(at, now);
      if (day !== 'today' && day !== 'tonight') return [];
      const done = one.readySince !== null;
      return [
        {
          id: `ready ${one.rack.id}`,
          status: 'good' as const,
          lead: `${studio.name}, ${room.name}: ${one.rack.name} ${done ? 'is ready today' : `will be ready ${day}`}`,
          rest: `${contents(one)}, ${done ? 'ready since' : 'about'} ${formats.time(at)}`,
          who: `anybody in ${studio.name}`,
          link: ['/rooms', room.id],
        },
      ];
    }),
  );
}

/** "48 vessels of Fig Leaf" */
function contents({ vessels, batches }: RackReadiness): string {
  const designs = [...new Set(batches.map((batch) => batch.designName).filter((name) => name !== null))];
  const named = designs.length > 0 && designs.length <= 2 ? ` of ${designs.join(' and ')}` : '';
  return `${vessels} ${vessels === 1 ? 'vessel' : 'vessels'}${named}`;
}

function testsDue(studio: NeedStudio): NeedLine[] {
  const recheck = studio.batches.filter((batch) => batch.recheckDue);
  const first = studio.batches.filter(
    (batch) =>
      !batch.recheckDue &&
      batch.wickTest.state === 'reached' &&
      batch.ship.state === 'blocked' &&
      batch.ship.blockedBy.includes('no-passing-test'),
  );
  return [
    ...dueTests(studio, recheck, 'Wick re-check due', 'the wax has hardened since the last test'),
    ...dueTests(studio, first, 'Wick test due', 'cured enough for the first test'),
  ];
}

/** One line a studio: designs in bold, then the batches to take samples from. */
function dueTests(studio: NeedStudio, due: readonly BatchCard[], what: string, why: string): NeedLine[] {
  const [first] = due;
  if (!first) return [];
  const designs = [...new Set(due.map((batch) => batch.designName ?? batch.code))];
  return [
    {
      id: `${what} ${studio.id}`,
      status: 'due',
      lead: `${studio.name}: ${what.toLowerCase()} for ${list(designs)}`,
      rest: `${list(due.map((batch) => batch.code))}; ${why}`,
      who: `anybody in ${studio.name}`,
      link: due.length === 1 ? ['/batches', first.id] : ['/batches'],
    },
  ];
}
