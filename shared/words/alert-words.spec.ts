import { describe, expect, it } from 'vitest';
import type { AlertFacts, AlertKind } from '#shared/contract/alerts';
import { alertPlace, alertSentence, alertWords, clearedSentence } from '#shared/words/alert-words';
import type { RoomFormats } from '#shared/words/room-state';

const NOW = Date.parse('2026-05-04T15:42:00Z');
const formats: RoomFormats = {
  temperature: (celsius, digits = 1) => `${celsius.toFixed(digits)} °C`,
  temperatureFigure: (celsius, digits = 1) => celsius.toFixed(digits),
  difference: (kelvin, digits = 1) => `${kelvin.toFixed(digits)} °C`,
  humidity: (percent) => `${percent} %`,
  timeSeenFrom: (instant) => new Date(instant).toISOString().slice(11, 16),
  duration: (ms) => `${ms / 60_000} min`,
};
const facts = (kind: AlertKind, change: Partial<AlertFacts> = {}): AlertFacts => ({
  kind,
  severity: 'warning',
  studioName: 'Quay Street',
  roomName: 'Loft',
  sensorName: null,
  value: null,
  worst: null,
  limit: null,
  dewPoint: null,
  since: '2026-05-04T14:20:00Z',
  lastHeardAt: null,
  batches: [],
  ...change,
});
const batch = (code: string, waxFamily = 'soy-container') => ({
  id: code,
  code,
  waxFamily,
  shelf: 'Rack 1, shelf 1',
});

describe('an alert in words', () => {
  it('too warm: room, value, limit, since when, which batches, what to do', () => {
    const warm = facts('too-warm', {
      value: 26.1,
      worst: 26.4,
      limit: 25,
      batches: [batch('L-118'), batch('L-121', 'soy-pillar'), batch('L-122')],
    });
    expect(alertPlace(warm)).toBe('Quay Street, Loft');
    expect(alertSentence(warm, formats, NOW)).toBe(
      'Too warm for 3 soy batches since 14:20: 26.1 °C, limit 25.0 °C, worst 26.4 °C.',
    );
    expect(alertWords(warm, formats, NOW).act).toBe(
      'Move L-118, L-121 and L-122, or cool the room by 1.1 °C.',
    );
  });

  it('too warm for nothing in particular, or for several waxes', () => {
    const room = facts('too-warm', { value: 28, worst: 28, limit: 27 });
    expect(alertWords(room, formats, NOW)).toEqual({
      headline: 'Too warm since 14:20',
      figures: '28.0 °C, limit 27.0 °C.',
      act: 'Cool the room by 1.0 °C.',
    });
    const mixed = facts('too-warm', { value: 28, limit: 27, batches: [batch('A'), batch('B', 'coconut')] });
    expect(alertWords(mixed, formats, NOW).headline).toBe('Too warm for 2 batches since 14:20');
  });

  it('too cold tells the slip of the dates', () => {
    const cold = facts('too-cold', {
      value: 2.13,
      worst: 2.13,
      limit: 1,
      celsius: 16.2,
      batches: [batch('S-1', 'palm')],
    });
    expect(alertSentence(cold, formats, NOW)).toBe(
      'Too cold to cure for 1 palm batch since 14:20: 16.2 °C: dates slip by 2.1 days, limit 1 day.',
    );
  });

  it('every kind names its figures and something to do', () => {
    const kinds: [AlertKind, Partial<AlertFacts>, RegExp][] = [
      ['too-damp', { value: 71, worst: 74, limit: 65 }, /71 %, limit 65 %, worst 74 %/],
      ['condensation', { value: 15.1, dewPoint: 14.6 }, /15.1 °C, dew point 14.6 °C/],
      ['swinging', { value: 5.2, limit: 4 }, /5.2 °C, limit 4.0 °C/],
      [
        'silent',
        { sensorName: 'North wall', lastHeardAt: '2026-05-04T14:00:00Z' },
        /North wall is silent.*Last heard 14:00/,
      ],
      ['stuck', { sensorName: 'North wall', value: 20.5 }, /Always 20.50 °C/],
      ['battery', { sensorName: 'North wall', value: 11.7, limit: 15 }, /12 %, limit 15 %/],
      ['intake-silent', { roomName: null }, /any sensor/],
    ];
    for (const [kind, change, expected] of kinds) {
      expect(alertSentence(facts(kind, change), formats, NOW)).toMatch(expected);
      expect(alertWords(facts(kind, change), formats, NOW).act).toMatch(/^[A-Z].*\.$/);
    }
  });

  it('says when it is over, how long it lasted and how bad it got', () => {
    expect(
      clearedSentence(facts('too-warm', { worst: 26.4 }), formats, Date.parse('2026-05-04T15:00:00Z')),
    ).toBe('Over: too warm lasted 40 min, at worst 26.4 °C.');
  });
});
