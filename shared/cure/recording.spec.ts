import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { BatchCycles } from '#shared/cure/cycles';
import { estimateBatch } from '#shared/cure/estimate';
import { CELL_MS } from '#shared/cure/grid';
import { measurePeriod } from '#shared/cure/period-measures';
import { RoomHistory } from '#shared/cure/room-history';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';

/** A dining room over four weeks, every 15 minutes, day-first dates in UTC (SML2010, doi 10.24432/C5RS3S, CC BY 4.0). */
const readings = readFileSync(new URL('../reference/sml2010-excerpt.txt', import.meta.url), 'utf8')
  .trim()
  .split('\n')
  .filter((line) => !line.startsWith('#'))
  .map((line) => {
    const [date, time, celsius] = line.split(' ');
    const [day, month, year] = date!.split('/').map(Number);
    const [hour, minute] = time!.split(':').map(Number);
    return { at: Date.UTC(year!, month! - 1, day, hour, minute), celsius: Number(celsius) };
  });

describe('a real recording', () => {
  it('gives the cure ages of an independent computation, to 1e-6 d', () => {
    expect(readings.length).toBeGreaterThan(2700);
    const byCell = new Map<number, number[]>();
    for (const { at, celsius } of readings) {
      const cell = Math.floor(at / 600_000);
      byCell.set(cell, [...(byCell.get(cell) ?? []), celsius]);
    }
    const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
    const [first, last] = [Math.min(...byCell.keys()), Math.max(...byCell.keys())];

    const room = new RoomHistory(first);
    for (const [cell, values] of byCell) room.set(cell, mean(values));
    const { kinetics } = WAX_FAMILY_DEFAULTS['soy-container'];
    const estimated = estimateBatch(
      {
        pouredAt: first * CELL_MS,
        stays: [{ roomId: 'a', from: first * CELL_MS, to: null }],
        kinetics,
        loadPercentOfWax: 6,
        lastTest: null,
        designPassed: true,
        cycles: new BatchCycles(),
      },
      () => room,
      (last + 1) * CELL_MS,
    );
    if (!estimated.known) throw new Error('an estimate was expected');

    // Every 15 minutes: each third ten-minute cell is empty and lies on the straight line between its neighbours.
    let [hard, scent] = [0, 0];
    let previous = NaN;
    for (let cell = first; cell <= last; cell++) {
      let celsius = byCell.has(cell) ? mean(byCell.get(cell)!) : NaN;
      if (Number.isNaN(celsius)) {
        let next = cell;
        while (!byCell.has(next)) next++;
        expect(next - cell).toBeLessThanOrEqual(18);
        celsius = previous + (mean(byCell.get(next)!) - previous) / (next - cell + 1);
      }
      const inverse = 1 / (Math.min(celsius, 27) + 273.15) - 1 / 294.15;
      hard += Math.exp((-50_000 / 8.314462618) * inverse) / 144;
      scent += Math.exp((-60_000 / 8.314462618) * inverse) / 144;
      previous = celsius;
    }
    expect(Math.abs(estimated.estimate.hardeningDays - hard)).toBeLessThanOrEqual(1e-6);
    expect(Math.abs(estimated.estimate.scentDays - scent)).toBeLessThanOrEqual(1e-6);
  });
});

describe('nights when the clocks change', () => {
  const zones = [
    { zone: 'Europe/Lisbon', day: '2026-03-29', hours: 23 },
    { zone: 'Europe/Lisbon', day: '2026-10-25', hours: 25 },
    { zone: 'Europe/Helsinki', day: '2026-03-29', hours: 23 },
    { zone: 'Europe/Helsinki', day: '2026-10-25', hours: 25 },
    { zone: 'America/Denver', day: '2026-03-08', hours: 23 },
    { zone: 'America/Denver', day: '2026-11-01', hours: 25 },
  ];

  it.each(zones)('$zone, $day has $hours hours and no cell is lost or doubled', ({ zone, day, hours }) => {
    const local = new Intl.DateTimeFormat('en-CA', { timeZone: zone, dateStyle: 'short' });
    const noon = Date.parse(`${day}T12:00:00Z`);
    const cells = Array.from({ length: 72 * 6 }, (_, index) => {
      const at = noon - 36 * 3_600_000 + index * CELL_MS;
      return { day: local.format(at), celsius: 20 + (index % 3), humidity: null };
    });
    const ofDay = cells.filter((cell) => cell.day === day);
    expect(ofDay).toHaveLength(hours * 6);
    const measures = measurePeriod(ofDay, { low: 19, high: 21 });
    expect(measures.observedHours).toBe(hours);
    expect(measures.dailySwing).toBe(2);
    expect(measures.inBand).toBeCloseTo(2 / 3, 12);
  });
});
