import type { DataSource } from 'typeorm';
import type { Rule } from '#shared/contract/alerts';
import type { AlertStudio, RuledRoom, RuledSensor } from './alert-records.js';
import { rulesOf } from './rule-defaults.js';

interface RoomRow {
  id: string;
  studio_id: string;
  name: string;
  band_low: number;
  band_high: number;
  heat_limit: number | null;
  humidity_high: number;
  swing_limit: number;
  slip_days: number;
  rules: string | null;
}

/** What the watcher watches: rooms with rules, sensors, studios with the people to tell. */
export class WatchedRepository {
  constructor(private readonly dataSource: DataSource) {}

  async rooms(): Promise<RuledRoom[]> {
    const rows = await this.dataSource.query<RoomRow[]>(
      'SELECT id, studio_id, name, band_low, band_high, heat_limit, humidity_high, swing_limit, slip_days, rules FROM room',
    );
    return rows.map((row) => ({
      id: row.id,
      studioId: row.studio_id,
      name: row.name,
      limits: {
        bandLow: row.band_low,
        bandHigh: row.band_high,
        heatLimit: row.heat_limit,
        humidityHigh: row.humidity_high,
        swingLimit: row.swing_limit,
        slipDays: row.slip_days,
      },
      rules: rulesOf(row.rules === null ? null : (JSON.parse(row.rules) as Rule[])),
    }));
  }

  async sensors(): Promise<RuledSensor[]> {
    const rows = await this.dataSource.query<
      {
        id: string;
        no: number;
        studio_id: string;
        room_id: string;
        name: string;
        interval_seconds: number;
        battery: number | null;
      }[]
    >(
      'SELECT id, no, studio_id, room_id, name, interval_seconds, battery FROM sensor WHERE retired_at IS NULL',
    );
    return rows.map((row) => ({
      id: row.id,
      no: row.no,
      studioId: row.studio_id,
      roomId: row.room_id,
      name: row.name,
      intervalSeconds: row.interval_seconds,
      battery: row.battery,
    }));
  }

  async studios(): Promise<AlertStudio[]> {
    const studios = await this.dataSource.query<
      {
        id: string;
        name: string;
        time_zone: string;
        unit: string;
        quiet_from: number | null;
        quiet_to: number | null;
        recipients: string;
        escalate_after_minutes: number;
      }[]
    >(
      'SELECT id, name, time_zone, unit, quiet_from, quiet_to, recipients, escalate_after_minutes FROM studio',
    );
    const people = await this.dataSource.query<
      {
        id: string;
        name: string;
        email: string;
        owner: number;
        studio_id: string | null;
        role: string | null;
      }[]
    >(
      `SELECT p.id, p.name, p.email, p.owner, m.studio_id, m.role FROM person p LEFT JOIN membership m ON m.person_id = p.id
       WHERE p.disabled = 0 AND p.password_hash IS NOT NULL ORDER BY p.name`,
    );
    const owners = people.filter((person) => person.owner === 1);
    return studios.map((studio) => {
      const members = people.filter((person) => person.studio_id === studio.id && person.role !== 'viewer');
      const chosen = (JSON.parse(studio.recipients) as string[]).flatMap(
        (id) => people.find((person) => person.id === id) ?? [],
      );
      const first = chosen.length > 0 ? chosen : members.filter(({ role }) => role === 'lead');
      const chain = new Map([...first, ...owners].map(({ id, name, email }) => [id, { id, name, email }]));
      return {
        id: studio.id,
        name: studio.name,
        timeZone: studio.time_zone,
        unit: studio.unit === 'F' ? 'F' : 'C',
        quietFrom: studio.quiet_from,
        quietTo: studio.quiet_to,
        escalateAfterMs: studio.escalate_after_minutes * 60_000,
        chain: [...chain.values()],
        watchers: [...new Set([...members, ...owners].map(({ id }) => id))],
      };
    });
  }

  /** When each sensor was last heard at a time not doubtful, epoch ms. */
  async lastHeard(sensorNos: readonly number[]): Promise<Map<number, number>> {
    const heard = new Map<number, number>();
    for (const no of sensorNos) {
      const [row] = await this.dataSource.query<{ at: Date }[]>(
        'SELECT at FROM reading WHERE sensor_no = ? AND flags & 1 = 0 ORDER BY at DESC LIMIT 1',
        [no],
      );
      if (row) heard.set(no, row.at.getTime());
    }
    return heard;
  }
}
