import { differenceInFahrenheit, toFahrenheit } from '#shared/units/temperature';
import type { RoomFormats } from '#shared/words/room-state';

/** How one studio writes figures and times: its unit, its time zone. */
export function studioFormats(unit: 'C' | 'F', timeZone: string): RoomFormats {
  const inFahrenheit = unit === 'F';
  const figure = (celsius: number, digits = 1) =>
    (inFahrenheit ? toFahrenheit(celsius) : celsius).toFixed(digits);
  const time = new Intl.DateTimeFormat('en-GB', { timeZone, hour: '2-digit', minute: '2-digit' });
  const day = new Intl.DateTimeFormat('en-GB', {
    timeZone,
    weekday: 'short',
    day: 'numeric',
    month: 'short',
  });
  const date = new Intl.DateTimeFormat('en-CA', { timeZone, dateStyle: 'short' });
  const timeSeenFrom = (instant: string | number, now: number): string => {
    const at = new Date(instant);
    if (date.format(at) === date.format(now)) return time.format(at);
    return `${day.format(at).replace(',', '')} ${time.format(at)}`;
  };
  return {
    temperature: (celsius, digits) => `${figure(celsius, digits)} °${unit}`,
    temperatureFigure: figure,
    difference: (kelvin, digits = 1) =>
      `${(inFahrenheit ? differenceInFahrenheit(kelvin) : kelvin).toFixed(digits)} °${unit}`,
    humidity: (percent) => `${Math.round(percent)} %`,
    timeSeenFrom,
    duration,
  };
}

/** "14 min", "31 h", "9 days" */
function duration(ms: number): string {
  const minutes = Math.max(1, Math.round(ms / 60_000));
  if (minutes < 120) return `${minutes} min`;
  const hours = Math.round(minutes / 60);
  return hours < 72 ? `${hours} h` : `${Math.round(hours / 24)} days`;
}
