import type { Alert } from '#shared/contract/alerts';
import { aBatch, aGate, aRack, REACHED, ROOM_ID, STUDIO_ID } from '#shared/words/test-floor';
import { studioFormats } from '../../core/time/studio-formats';
import { type NeedRoom, type NeedStudio, troubles, workDue } from './needs-now';

const needsNow = (studios: NeedStudio[], now: number) => [
  ...troubles(studios, now),
  ...workDue(studios, now),
];
const NOW = Date.parse('2026-05-04T14:42:00.000Z');

function aRoom(over: Partial<NeedRoom> = {}): NeedRoom {
  return { id: ROOM_ID, name: 'Cellar', silence: null, racks: [aRack(1)], batches: [], ...over };
}

function aStudio(over: Partial<NeedStudio> = {}): NeedStudio {
  return {
    id: STUDIO_ID,
    name: 'Quay Street',
    formats: studioFormats('Europe/Lisbon', 'C'),
    rooms: [aRoom()],
    batches: [],
    alerts: [],
    tests: true,
    ...over,
  };
}

function anAlert(id: string, over: Partial<Alert> = {}, facts: Partial<Alert['facts']> = {}): Alert {
  return {
    id,
    studioId: STUDIO_ID,
    roomId: ROOM_ID,
    sensorId: null,
    facts: {
      kind: 'too-warm',
      severity: 'warning',
      studioName: 'Quay Street',
      roomName: 'Loft',
      sensorName: null,
      value: 26.1,
      worst: 26.4,
      limit: 25,
      dewPoint: null,
      since: '2026-05-04T13:20:00.000Z',
      lastHeardAt: null,
      batches: [{ id: aBatch(18).id, code: 'L-118', waxFamily: 'soy-container', shelf: 'Rack 1, shelf 1' }],
      ...facts,
    },
    state: 'open',
    raisedAt: '2026-05-04T13:35:00.000Z',
    clearedAt: null,
    acknowledged: null,
    shelved: null,
    holder: { id: 'ines', name: 'Ines Aldous' },
    version: 4,
    ...over,
  };
}

describe('what needs somebody now', () => {
  it('is nothing on a calm day', () => {
    expect(needsNow([aStudio()], NOW)).toEqual([]);
  });

  it('tells an alert with its figures and whose it is', () => {
    const [line] = needsNow([aStudio({ alerts: [anAlert('a')] })], NOW);
    expect(line?.lead).toBe('Quay Street, Loft: too warm for 1 soy batch since 14:20:');
    expect(line?.rest).toContain('limit 25.0');
    expect(line?.who).toBe('Ines Aldous, not yet acknowledged');
    expect(line?.link).toEqual(['/alerts', 'a']);
    expect(line?.status).toBe('heat');
  });

  it('puts the critical before the rest and leaves out what is shelved', () => {
    const shelved = anAlert('s', {
      shelved: { by: 'Ines', until: '2026-05-04T22:00:00.000Z', reason: 'known' },
    });
    const critical = anAlert(
      'c',
      { raisedAt: '2026-05-04T14:30:00.000Z', holder: null },
      { severity: 'critical' },
    );
    const lines = needsNow([aStudio({ alerts: [shelved, anAlert('w'), critical] })], NOW);
    expect(lines.map((line) => line.id)).toEqual(['c', 'w']);
    expect(lines[0]?.who).toBe('nobody yet');
  });

  it('names a silent room until its alert does', () => {
    const silent = aRoom({
      silence: { celsius: 18.9, at: '2026-05-04T14:20:00.000Z' },
      batches: [aBatch(1)],
    });
    const [line] = needsNow([aStudio({ rooms: [silent] })], NOW);
    expect(line?.lead).toBe('Quay Street, Cellar is silent');
    expect(line?.rest).toBe('last 18.9\u00a0°C, 22 min ago; dates there widen by the hour');
    const alerts = [anAlert('s', {}, { kind: 'silent', sensorName: 'Window' })];
    expect(needsNow([aStudio({ rooms: [silent], alerts })], NOW).map(({ id }) => id)).toEqual(['s']);
  });

  it('tells racks that are, or will be, ready today in the studio’s own day', () => {
    const batches = [aBatch(1, { ship: aGate({ ...REACHED, reachedAt: '2026-05-04T08:40:00.000Z' }) })];
    const [line] = needsNow([aStudio({ rooms: [aRoom({ batches })] })], NOW);
    expect(line?.lead).toBe('Quay Street, Cellar: Rack 1 is ready today');
    expect(line?.rest).toBe('24 vessels of Fig Leaf, ready since 09:40');
    const tonight = [aBatch(1, { ship: aGate({ t50: '2026-05-04T20:10:00.000Z' }) })];
    expect(needsNow([aStudio({ rooms: [aRoom({ batches: tonight })] })], NOW)[0]?.lead).toContain(
      'Rack 1 will be ready tonight',
    );
    const yesterday = [aBatch(1, { ship: aGate(REACHED) })];
    expect(needsNow([aStudio({ rooms: [aRoom({ batches: yesterday })] })], NOW)).toEqual([]);
  });

  it('gathers due tests of a studio in one line, for those who test', () => {
    const blocked = aGate({ state: 'blocked', blockedBy: ['no-passing-test'] });
    const batches = [
      aBatch(1, { wickTest: aGate(REACHED), ship: blocked, designName: 'Cedar Hall' }),
      aBatch(2, { wickTest: aGate(REACHED), ship: blocked, designName: 'Linen Yard' }),
      aBatch(3, { recheckDue: true }),
    ];
    const lines = needsNow([aStudio({ batches })], NOW);
    expect(lines.map((line) => line.lead)).toEqual([
      'Quay Street: wick re-check due for Fig Leaf',
      'Quay Street: wick test due for Cedar Hall and Linen Yard',
    ]);
    expect(lines[0]?.link).toEqual(['/batches', aBatch(3).id]);
    expect(needsNow([aStudio({ batches, tests: false })], NOW)).toEqual([]);
  });
});
