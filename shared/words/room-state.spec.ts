import { describe, expect, it } from 'vitest';
import { aBatch, aRoomNow, someLimits } from '#shared/words/test-floor';
import { codes, roomState, type RoomFacts, type RoomFormats, tradeName } from '#shared/words/room-state';

const NOW = Date.parse('2026-05-04T14:42:00.000Z');
const formats: RoomFormats = {
  temperature: (celsius, digits = 1) => `${celsius.toFixed(digits)} °C`,
  temperatureFigure: (celsius, digits = 1) => celsius.toFixed(digits),
  difference: (kelvin, digits = 1) => `${kelvin.toFixed(digits)} °C`,
  humidity: (percent) => `${percent.toFixed(0)} %`,
  timeSeenFrom: (instant) => new Date(instant).toISOString().slice(11, 16),
  duration: (ms) => `${Math.round(ms / 60_000)} min`,
};

const facts = (now: Parameters<typeof aRoomNow>[0], over: Partial<RoomFacts> = {}): RoomFacts => ({
  now: aRoomNow(now),
  limits: someLimits(),
  batches: [aBatch(1), aBatch(2)],
  racks: 3,
  ...over,
});

const said = (given: RoomFacts) => {
  const { lead, rest } = roomState(given, formats, NOW);
  return `${lead} ${rest}`;
};

describe('the state of a room in words', () => {
  it('names the batches at risk, the limit, the peak and what to do when too warm', () => {
    const heat = {
      condition: 'heat',
      celsius: 26.1,
      since: '2026-05-04T13:20:00.000Z',
      peakToday: 26.3,
    } as const;
    const batches = [aBatch(18, { atRisk: true }), aBatch(21, { atRisk: true }), aBatch(3)];
    expect(said(facts(heat, { batches }))).toBe(
      'Too warm for 2 soy batches since 13:20: 26.1 °C, limit 25.0. Peak today 26.3. Move L-118 and L-121, or cool the room by 1.1 °C.',
    );
  });

  it('does not name the wax to somebody who may not see it, nor where several families are concerned', () => {
    const heat = { condition: 'heat', celsius: 26.1, since: null } as const;
    const hidden = [aBatch(1, { atRisk: true, waxFamily: null })];
    expect(said(facts(heat, { batches: hidden }))).toContain('Too warm for 1 batch:');
    const mixed = [aBatch(1, { atRisk: true }), aBatch(2, { atRisk: true, waxFamily: 'rapeseed' })];
    expect(said(facts(heat, { batches: mixed }))).toContain('Too warm for 2 batches:');
  });

  it('tells how long it has been cold and by how much dates slipped', () => {
    const cold = {
      condition: 'cold',
      celsius: 16.2,
      since: '2026-05-04T12:42:00.000Z',
      slippedHours: 19.2,
    } as const;
    expect(said(facts(cold))).toBe(
      'Colder than 18 °C for 120 min: now 16.2 °C; dates have slipped by 19 h since yesterday.',
    );
    expect(said(facts({ ...cold, slippedHours: 0 }, { batches: [] }))).toBe(
      'Colder than 18 °C for 120 min: now 16.2 °C.',
    );
  });

  it('never speaks of old figures as if they were live', () => {
    const silent = {
      condition: 'silent',
      celsius: 18.9,
      at: '2026-05-04T14:20:00.000Z',
      stale: true,
    } as const;
    expect(said(facts(silent))).toBe(
      'No reading for 22 min. Last 18.9 °C at 14:20. Dates below use the forecast and widen by the hour.',
    );
    expect(said(facts(silent, { batches: [] }))).toBe('No reading for 22 min. Last 18.9 °C at 14:20. ');
  });

  it('says that a room is above its band although not yet too warm', () => {
    expect(said(facts({ celsius: 24.6 }))).toBe(
      'Above its band, not yet too warm: 24.6 °C, band up to 24.0, heat limit 25.0.',
    );
  });

  it('counts racks and vessels of a calm room and tells a slip of an hour or more', () => {
    expect(said(facts({ since: null }))).toBe('In its band. 3 racks, 48 vessels.');
    expect(said(facts({ since: null, slippedHours: 2.6 }))).toContain(
      'Dates slipped by 3 h since yesterday.',
    );
    expect(said(facts({ since: null, slippedHours: -2.6 }))).toContain(
      'Dates came 3 h nearer since yesterday.',
    );
    expect(said(facts({ since: null }, { batches: [], racks: 1 }))).toBe(
      'In its band. 1 rack, nothing curing.',
    );
  });

  it('tells dampness by humidity, limit and dew point', () => {
    const damp = { condition: 'damp', humidity: 71, since: null, dewPoint: 15.8 } as const;
    expect(said(facts(damp))).toContain('Too damp: 71 % humidity, limit 65 %, dew point 15.8 °C.');
  });

  it('knows that a room without a sensor has not been heard', () => {
    expect(said(facts({ condition: 'never-heard', celsius: null, at: null }))).toBe(
      'No sensor has been heard here yet. 3 racks, 48 vessels.',
    );
  });
});

describe('words of batches', () => {
  it('lists up to four codes and counts the rest', () => {
    const five = [1, 2, 3, 4, 5].map((number) => aBatch(number));
    expect(codes(five.slice(0, 1))).toBe('L-101');
    expect(codes(five.slice(0, 4))).toBe('L-101, L-102, L-103 and L-104');
    expect(codes(five)).toBe('L-101, L-102, L-103 and 2 more');
  });

  it('calls a wax as the trade does', () => {
    expect(tradeName('paraffin-pillar')).toBe('paraffin');
    expect(tradeName('beeswax')).toBe('beeswax');
    expect(tradeName(null)).toBe('');
  });
});
