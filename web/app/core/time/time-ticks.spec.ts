import { timeTicks } from './time-ticks';

const LISBON = 'Europe/Lisbon';
const labels = (from: string, to: string, wanted: number, zone = LISBON) =>
  timeTicks(Date.parse(from), Date.parse(to), zone, wanted).map((tick) => tick.label);

describe('ticks of a time axis', () => {
  it('stand at full local hours and name the day at midnight', () => {
    expect(labels('2026-05-04T18:10:00Z', '2026-05-05T00:10:00Z', 6)).toEqual([
      '20:00',
      '21:00',
      '22:00',
      '23:00',
      'Tue 5 May',
      '01:00',
    ]);
  });

  it('stay at local midnights over a clock change', () => {
    const ticks = timeTicks(
      Date.parse('2026-03-27T00:00:00Z'),
      Date.parse('2026-03-31T00:00:00Z'),
      LISBON,
      6,
    );
    expect(ticks.map((tick) => new Date(tick.at).toISOString())).toEqual([
      '2026-03-27T00:00:00.000Z',
      '2026-03-28T00:00:00.000Z',
      '2026-03-29T00:00:00.000Z',
      '2026-03-29T23:00:00.000Z',
      '2026-03-30T23:00:00.000Z',
    ]);
  });

  it('do not repeat the hour that a clock change repeats twice as a different place', () => {
    const ticks = timeTicks(
      Date.parse('2026-10-24T22:30:00Z'),
      Date.parse('2026-10-25T03:30:00Z'),
      LISBON,
      9,
    );
    expect(ticks.map((tick) => tick.label)).toEqual(['Sun 25 Oct', '01:00', '01:00', '02:00', '03:00']);
    expect(new Set(ticks.map((tick) => tick.at)).size).toBe(ticks.length);
  });

  it('become weeks and months as the span grows, never more than wanted', () => {
    expect(labels('2026-04-01T00:00:00Z', '2026-05-01T00:00:00Z', 6).length).toBeLessThanOrEqual(6);
    expect(labels('2025-05-04T00:00:00Z', '2026-05-04T00:00:00Z', 7)).toEqual([
      'July',
      'Sept',
      'Nov',
      'Jan 2026',
      'Mar',
      'May',
    ]);
  });
});
