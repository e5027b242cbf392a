import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { TestGateway, type TestPerson } from '../../test-gateway.js';

const FIELDS = { name: 'Quay', timeZone: 'Europe/Lisbon', unit: 'C', address: 'Dock 4', pressureHpa: 1009 };

describe('studios', () => {
  let gateway: TestGateway;
  let owner: TestPerson;

  beforeAll(async () => {
    gateway = await TestGateway.open();
    owner = await gateway.addPerson('Olive Owner', { owner: true });
  });
  afterAll(() => gateway.close());

  const create = (fields: object = {}) =>
    gateway.call(owner, 'POST', '/api/studios', { ...FIELDS, ...fields });

  it('are created by an owner and seen by their people with the role held there', async () => {
    const created = (await create()).body;
    expect(created).toMatchObject({
      ...FIELDS,
      role: 'owner',
      version: 1,
      recipients: [],
      escalateAfterMinutes: 30,
    });
    const viewer = await gateway.addPerson('Vi Viewer', { memberships: { [created.id]: 'viewer' } });
    expect((await gateway.call(viewer, 'GET', '/api/studios')).body).toEqual([
      { ...created, role: 'viewer' },
    ]);
    const stranger = await gateway.addPerson('Sid Stranger');
    expect((await gateway.call(stranger, 'GET', '/api/studios')).body).toEqual([]);
  });

  it('are changed with the version that was seen', async () => {
    const { body: studio } = await create({ name: 'Mill' });
    const lead = await gateway.addPerson('Lea Lead', { memberships: { [studio.id]: 'lead' } });
    const change = (fields: object) =>
      gateway.call(lead, 'PUT', `/api/studios/${studio.id}`, { ...FIELDS, version: 1, ...fields });
    expect((await change({ name: 'Old Mill', quietFrom: 1320, quietTo: 360 })).body).toMatchObject({
      name: 'Old Mill',
      quietFrom: 1320,
      quietTo: 360,
      version: 2,
      role: 'lead',
    });
    expect((await change({ name: 'New Mill' })).body.code).toBe('changed-meanwhile');
    expect((await change({ version: 2, timeZone: 'Mars/Olympus' })).status).toBe(400);
    const [line] = await gateway.query<{ was: string; became: string }[]>(
      'SELECT was, became FROM audit WHERE thing_id = ? ORDER BY id DESC LIMIT 1',
      [studio.id],
    );
    expect([JSON.parse(line!.was).name, JSON.parse(line!.became).name]).toEqual(['Mill', 'Old Mill']);
  });

  it('reach only their own people and owners with alerts', async () => {
    const { body: studio } = await create({ name: 'Barn' });
    const maker = await gateway.addPerson('May Maker', { memberships: { [studio.id]: 'maker' } });
    const stranger = await gateway.addPerson('Sid Stranger');
    const change = (version: number, recipients: string[]) =>
      gateway.call(owner, 'PUT', `/api/studios/${studio.id}`, { ...FIELDS, version, recipients });
    expect((await change(1, [maker.id, owner.id])).body.recipients).toEqual([maker.id, owner.id]);
    expect((await change(2, [stranger.id])).body.fields[0].path).toBe('recipients');
    expect((await create({ recipients: [maker.id] })).status).toBe(400);
  });

  it('have their local days made anew when the time zone changes', async () => {
    const { body: studio } = await create({ name: 'Far' });
    const [roomId, sensorId] = [randomUUID(), randomUUID()];
    await gateway.query(
      `INSERT INTO room (id, studio_id, name, band_low, band_high, humidity_high, swing_limit, slip_days, notes) VALUES (?,?,'Cellar',18,24,60,3,2,'')`,
      [roomId, studio.id],
    );
    await gateway.query(
      `INSERT INTO sensor (id, studio_id, room_id, name, device_id, secret_hash) VALUES (?,?,?,'Shelf',?,?)`,
      [sensorId, studio.id, roomId, `sensor-${sensorId.slice(0, 8)}`, 'x'.repeat(64)],
    );
    const [{ no }] = await gateway.query<[{ no: number }]>('SELECT no FROM sensor WHERE id = ?', [sensorId]);
    const start = Date.parse('2026-05-03T18:00:00Z');
    const marks: unknown[] = [];
    for (let hour = 0; hour < 30; hour++) {
      const at = new Date(start + hour * 3_600_000);
      await gateway.query('INSERT INTO reading (sensor_no, at, received_at, t_micro) VALUES (?,?,?,?)', [
        no,
        at,
        at,
        20e6 + hour,
      ]);
      marks.push([no, at]);
    }
    await gateway.query('INSERT INTO dirty_mark (sensor_no, bucket) VALUES ?', [marks]);
    const days = async () => {
      const rows = await gateway.query<{ bucket: Date; n: number }[]>(
        'SELECT bucket, n FROM rollup WHERE sensor_no = ? AND level = 1440 ORDER BY bucket',
        [no],
      );
      return rows.map(({ bucket, n }) => [bucket.toISOString(), n]);
    };
    // Lisbon's summer days begin at 23:00 UTC, Auckland's May days at 12:00 UTC.
    await expect.poll(days, { timeout: 15_000 }).toEqual([
      ['2026-05-02T23:00:00.000Z', 5],
      ['2026-05-03T23:00:00.000Z', 24],
      ['2026-05-04T23:00:00.000Z', 1],
    ]);
    await gateway.call(owner, 'PUT', `/api/studios/${studio.id}`, {
      ...FIELDS,
      version: 1,
      timeZone: 'Pacific/Auckland',
    });
    await expect.poll(days, { timeout: 15_000 }).toEqual([
      ['2026-05-03T12:00:00.000Z', 18],
      ['2026-05-04T12:00:00.000Z', 12],
    ]);
  });
});
