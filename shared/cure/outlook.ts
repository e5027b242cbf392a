import { Forecast, HORIZON } from '#shared/cure/forecast';
import type { KineticClass } from '#shared/cure/kinetics';
import type { RoomHistory } from '#shared/cure/room-history';
import type { RoomStay, Segment } from '#shared/cure/stays';

/** What is expected of the place a batch stands in: its room's forecast, or the last known temperature for ever. */
export class Outlook {
  private constructor(
    readonly from: number,
    private readonly forecastFor: (kinetic: KineticClass) => Forecast,
  ) {}

  /** @returns null when nothing at all is known of the place */
  static of(
    stays: readonly RoomStay[],
    segments: readonly Segment[],
    historyOf: (roomId: string) => RoomHistory | null,
    from: number,
  ): Outlook | null {
    const current = stays.reduce<RoomStay | null>(
      (latest, stay) => (latest === null || stay.from >= latest.from ? stay : latest),
      null,
    );
    const open = current?.to === null ? historyOf(current.roomId) : null;
    if (open?.known && from > open.origin && from <= open.end) {
      return new Outlook(from, (kinetic) => open.forecast(kinetic, from));
    }
    const last = segments.at(-1);
    if (last === undefined) return null;
    const celsius = last.kind === 'hole' ? last.celsius : last.room.celsius(last.to - 1);
    const start = { cell: from, celsius, hours: [] };
    return new Outlook(from, (kinetic) => new Forecast(start, kinetic));
  }

  forecast(kinetic: KineticClass): Forecast {
    return this.forecastFor(kinetic);
  }

  /** First forecast cell after which `days` more have been gathered; null beyond the horizon. */
  cellReaching(kinetic: KineticClass, days: number): number | null {
    const cells = cellsReaching(this.forecast(kinetic), days);
    return cells === null ? null : this.from + cells - 1;
  }
}

/** Fewest forecast cells that gather at least `days`; null beyond the horizon. Grows the forecast no further than needed. */
export function cellsReaching(forecast: Forecast, days: number): number | null {
  let high = 1;
  while (forecast.days(high) < days) {
    if (high >= HORIZON) return null;
    high = Math.min(HORIZON, high * 2);
  }
  let low = 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (forecast.days(middle) >= days) high = middle;
    else low = middle + 1;
  }
  return low;
}
