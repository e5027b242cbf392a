import { createHash } from 'node:crypto';
import type { DataSource } from 'typeorm';
import { dewPoint } from '#shared/air/moist-air';
import type { DemoScenario } from '#shared/contract/demo-scenario';
import type { RoomNow } from '#shared/contract/overview';
import { CELLS_PER_DAY, cellOf, cellStart } from '#shared/cure/grid';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import type { AlertRecord, AlertStudio, KeptRule, Write } from '../features/alerts/alert-records.js';
import { AlertsRepository } from '../features/alerts/alerts-repository.js';
import { lookAtRoom, type RoomPicture } from '../features/alerts/conditions.js';
import { rulesOf } from '../features/alerts/rule-defaults.js';
import { NORMAL } from '../features/alerts/rule-machine.js';
import { transition } from '../features/alerts/transitions.js';
import type { StandingBatch } from '../features/estimates/standing.js';
import { type CellRun, RoomCellsRepository } from '../history/room-cells-repository.js';
import type { DemoFloor } from './demo-floor.js';

type DemoStudio = DemoScenario['studios'][number];
type DemoRoom = DemoStudio['rooms'][number];

const KINDS = ['too-warm', 'too-damp', 'swinging'] as const;
const HISTORY_DAYS = 90;

/**
 * Raises the alerts the ninety days of readings would have raised, with the same rules; whoever pours there has acknowledged
 * most of them some minutes later. Alerts that are still so stay open. @returns how many there are
 */
export async function demoPastAlerts(
  dataSource: DataSource,
  scenario: DemoScenario,
  floor: DemoFloor,
): Promise<number> {
  const repository = new AlertsRepository(dataSource);
  const end = cellOf(Date.parse(scenario.now));
  const from = end - HISTORY_DAYS * CELLS_PER_DAY;
  let count = 0;
  for (const studio of scenario.studios) {
    for (const room of studio.rooms) {
      const roomId = floor.id('room', room.key);
      const run = (await new RoomCellsRepository(dataSource).cells([roomId], from, end)).get(roomId);
      if (!run) continue;
      const { writes, alerts } = new RoomPast(scenario, floor, studio, room, run).alerts();
      await repository.write(writes);
      count += alerts;
    }
  }
  return count;
}

/** The past of one room, looked at cell by cell. */
class RoomPast {
  constructor(
    private readonly scenario: DemoScenario,
    private readonly floor: DemoFloor,
    private readonly studio: DemoStudio,
    private readonly room: DemoRoom,
    private readonly run: CellRun,
  ) {}

  alerts(): { writes: Write[]; alerts: number } {
    const writes: Write[] = [];
    let alerts = 0;
    const stays = this.#stays();
    const pictures = Array.from(this.run.celsius, (_, index) => {
      const at = cellStart(this.run.fromCell + index + 1);
      const there = stays.filter(({ from, to }) => from <= at && at < to);
      return {
        at,
        picture: this.#picture(
          index,
          at,
          there.map(({ batch }) => batch),
        ),
      };
    });
    for (const kind of KINDS) {
      const rule = rulesOf(null).find((one) => one.kind === kind);
      if (!rule) continue;
      const { studio, floor, room } = this;
      const subject = {
        ...{ key: `${kind}:${floor.id('room', room.key)}`, kind, rule },
        ...{ studioId: floor.id('studio', studio.key), roomId: floor.id('room', room.key), sensorId: null },
      };
      const around = {
        studio: this.#alertStudio(),
        roomName: room.name,
        sensorName: null,
        heldUntil: () => null,
      };
      let kept: KeptRule = { state: NORMAL, alertId: null };
      let alert: AlertRecord | null = null;
      let steps: Write[] = [];
      for (const { at, picture } of pictures) {
        const found = lookAtRoom(kind, rule, picture, at);
        const came = transition(subject, { ...found, lastHeardAt: at }, kept, alert, around, at);
        kept = came.kept;
        if (came.alert) alert = came.alert;
        steps.push(...came.writes.filter((write) => write.do === 'step'));
        if (came.news?.what === 'cleared' && alert !== null) {
          writes.push({ do: 'raise', alert: this.#answered(alert, steps) }, ...steps);
          alerts++;
          [alert, steps] = [null, []];
        }
      }
      if (alert !== null) {
        writes.push({ do: 'raise', alert }, ...steps);
        alerts++;
      }
      writes.push({ do: 'keep', key: subject.key, rule: kept, at: Date.parse(this.scenario.now) });
    }
    return { writes, alerts };
  }

  /** Acknowledged after some minutes, the same ones every time. */
  #answered(alert: AlertRecord, steps: Write[]): AlertRecord {
    const chance = createHash('sha256').update(`${this.room.key}${alert.raisedAt}`).digest();
    const at = alert.raisedAt + (6 + ((chance[0] ?? 0) % 50)) * 60_000;
    if (alert.clearedAt === null || at > alert.clearedAt) return { ...alert, state: 'cleared' };
    const person = this.#pourer();
    const note = (chance[1] ?? 0) % 3 === 0 ? 'Aired the room.' : '';
    steps.push({ do: 'step', alertId: alert.id, at, what: 'acknowledged', who: person, note, value: null });
    return {
      ...alert,
      ...{
        state: 'cleared',
        acknowledgedBy: person,
        acknowledgedAt: at,
        acknowledgeNote: note,
        holder: person,
      },
    };
  }

  #pourer(): string {
    const maker = this.scenario.people.find(({ memberships }) =>
      memberships.some(({ studio, role }) => studio === this.studio.key && role === 'maker'),
    );
    return this.floor.id('person', maker?.key ?? 'marit');
  }

  #alertStudio(): AlertStudio {
    const { key, name, timeZone, unit } = this.studio;
    return {
      ...{ id: this.floor.id('studio', key), name, timeZone, unit, quietFrom: null, quietTo: null },
      ...{ escalateAfterMs: 30 * 60_000, chain: [], watchers: [] },
    };
  }

  #picture(index: number, at: number, standing: readonly StandingBatch[]): RoomPicture {
    const { celsius, humidity } = this.run;
    const t = celsius[index] ?? NaN;
    const rh = humidity[index] ?? NaN;
    const limits = [this.room.limits.heatLimit, ...standing.map(({ frostingFrom }) => frostingFrom)];
    const known = limits.filter((limit) => limit !== null);
    const now: RoomNow = {
      ...{ roomId: '', condition: 'fine', since: null, peakToday: null, slippedHours: 0, battery: null },
      celsius: Number.isNaN(t) ? null : t,
      humidity: Number.isNaN(rh) ? null : rh,
      dewPoint: Number.isNaN(t) || Number.isNaN(rh) ? null : dewPoint(t, rh),
      at: new Date(at).toISOString(),
      stale: Number.isNaN(t),
      heatLimit: known.length === 0 ? this.room.limits.bandHigh : Math.min(...known),
    };
    return { limits: this.room.limits, now, standing, swing: this.#swing(index), coldest: null };
  }

  #swing(index: number): number | null {
    let [low, high] = [Infinity, -Infinity];
    for (let at = Math.max(0, index - CELLS_PER_DAY + 1); at <= index; at++) {
      const celsius = this.run.celsius[at] ?? NaN;
      if (celsius < low) low = celsius;
      if (celsius > high) high = celsius;
    }
    return high < low ? null : high - low;
  }

  /** Who stood in the room and when, epoch ms. */
  #stays(): { from: number; to: number; batch: StandingBatch }[] {
    return this.scenario.batches.flatMap((batch) => {
      const design = this.scenario.designs.find(({ key }) => key === batch.design);
      const family = this.scenario.waxes.find(({ key }) => key === design?.wax)?.family;
      if (!family) return [];
      const { frosting, frostingFrom } = WAX_FAMILY_DEFAULTS[family].kinetics;
      return batch.stays
        .filter(({ rack }) => rack.startsWith(`${this.room.key}/`))
        .map((stay) => ({
          from: Date.parse(stay.from),
          to: stay.to === null ? Infinity : Date.parse(stay.to),
          batch: {
            ...{
              id: this.floor.id('batch', batch.code),
              code: batch.code,
              waxFamily: family,
              frosting,
              frostingFrom,
            },
            shelf: `Rack ${stay.rack.split('/')[1]}, shelf ${stay.shelf}`,
            ...{ slipDays: null, slipIfItStaysDays: null },
          },
        }));
    });
  }
}
