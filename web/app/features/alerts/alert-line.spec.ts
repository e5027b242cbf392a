import { describe, expect, it } from 'vitest';
import type { Alert } from '#shared/contract/alerts';
import { studioFormats } from '../../core/time/studio-formats';
import { alertLine, byUrgency, whose } from './alert-line';

const NOW = Date.parse('2026-05-04T15:00:00Z');
const formats = studioFormats('Europe/Lisbon', 'C');
const alert = (change: Partial<Alert> = {}, severity: Alert['facts']['severity'] = 'warning'): Alert => ({
  ...{ id: 'a', studioId: 's', roomId: 'r', sensorId: null, state: 'open' },
  ...{
    raisedAt: '2026-05-04T13:35:00Z',
    clearedAt: null,
    acknowledged: null,
    shelved: null,
    holder: null,
    version: 1,
  },
  facts: {
    ...{ kind: 'too-warm', severity, studioName: 'Quay Street', roomName: 'Loft', sensorName: null },
    ...{
      value: 26.1,
      worst: 26.4,
      limit: 25,
      dewPoint: null,
      since: '2026-05-04T13:20:00Z',
      lastHeardAt: null,
    },
    batches: [],
  },
  ...change,
});

describe('a line of the alerts list', () => {
  it('says where, what, how bad and whose', () => {
    expect(alertLine(alert(), formats, NOW)).toMatchObject({
      place: 'Quay Street, Loft',
      headline: 'Too warm since 14:20',
      who: 'nobody yet',
      status: 'heat',
    });
  });

  it('tells how long it lasted once it is over', () => {
    const over = alert({ state: 'returned', clearedAt: '2026-05-04T14:20:00Z' });
    expect(alertLine(over, formats, NOW).figures).toMatch(
      /^Over: too warm lasted 60.min, at worst 26.4.°C\.$/,
    );
  });

  it('says who has it', () => {
    const ack = { by: 'Ines', at: '2026-05-04T14:00:00Z', note: '' };
    expect(whose(alert({ state: 'acknowledged', acknowledged: ack }), formats, NOW)).toBe('Ines has it');
    expect(whose(alert({ holder: { id: 'p', name: 'Tomas' }, acknowledged: ack }), formats, NOW)).toBe(
      'Tomas has it',
    );
    const shelved = { by: 'Ines', until: '2026-05-04T17:00:00Z', reason: 'fitter' };
    expect(whose(alert({ shelved }), formats, NOW)).toBe('shelved by Ines until 18:00: fitter');
  });

  it('puts the worst first and what is over last', () => {
    const late = alert({ id: 'late', raisedAt: '2026-05-04T14:00:00Z' });
    const critical = alert({ id: 'critical' }, 'critical');
    const over = alert({ id: 'over', state: 'returned', clearedAt: '2026-05-04T14:20:00Z' });
    const notice = alert({ id: 'notice', raisedAt: '2026-05-04T14:30:00Z' }, 'notice');
    expect(
      [over, notice, alert({ id: 'early' }), late, critical].sort(byUrgency).map(({ id }) => id),
    ).toEqual(['critical', 'late', 'early', 'notice', 'over']);
  });
});
