import { inject, Injectable } from '@angular/core';
import {
  humidityWords,
  temperature,
  temperatureDifference,
  temperatureFigure,
  unitSign,
} from '../units/measure-words';
import { type TemperatureUnit, Units } from '../units/units';
import {
  clockTime,
  dayAndTime,
  daySeenFrom,
  dayWords,
  durationWords,
  type Instant,
  timeSeenFrom,
  zoneCity,
} from './zoned-time';

/** How one studio's figures and times are written: its own zone, the person's or the studio's unit. */
export interface StudioFormats {
  readonly unit: TemperatureUnit;
  /** "°C" */
  readonly unitSign: string;
  readonly timeZone: string;
  /** "Lisbon" */
  readonly city: string;
  /** "26.1 °C" */
  readonly temperature: (celsius: number, digits?: number) => string;
  /** "26.1" */
  readonly temperatureFigure: (celsius: number, digits?: number) => string;
  /** "1.1 °C" of a difference in K */
  readonly difference: (kelvin: number, digits?: number) => string;
  /** "51 %" */
  readonly humidity: (percent: number) => string;
  /** "14:20" */
  readonly time: (instant: Instant) => string;
  /** "Fri 8 May" */
  readonly day: (instant: Instant) => string;
  /** "Fri 8 May 14:20" */
  readonly dayAndTime: (instant: Instant) => string;
  /** "14:20", "yesterday 14:20", "Fri 8 May 14:20" */
  readonly timeSeenFrom: (instant: Instant, now: Instant) => string;
  /** "today", "tonight", "tomorrow", "Fri 8 May" */
  readonly daySeenFrom: (instant: Instant, now: Instant) => string;
  /** "14 min", "31 h", "9 days" */
  readonly duration: (ms: number) => string;
}

/** Gives each studio its formats. Read inside a `computed`, it follows the person's choice of unit. */
@Injectable({ providedIn: 'root' })
export class Formats {
  private readonly units = inject(Units);
  private readonly made = new Map<string, StudioFormats>();

  of(studio: { readonly timeZone: string; readonly unit: TemperatureUnit }): StudioFormats {
    const unit = this.units.unitFor(studio.unit);
    const key = `${unit} ${studio.timeZone}`;
    let formats = this.made.get(key);
    if (!formats) {
      formats = studioFormats(studio.timeZone, unit);
      this.made.set(key, formats);
    }
    return formats;
  }
}

/** Formats for one time zone and unit. */
export function studioFormats(timeZone: string, unit: TemperatureUnit): StudioFormats {
  return {
    unit,
    unitSign: unitSign(unit),
    timeZone,
    city: zoneCity(timeZone),
    temperature: (celsius, digits) => temperature(celsius, unit, digits),
    temperatureFigure: (celsius, digits) => temperatureFigure(celsius, unit, digits),
    difference: (kelvin, digits) => temperatureDifference(kelvin, unit, digits),
    humidity: humidityWords,
    time: (instant) => clockTime(instant, timeZone),
    day: (instant) => dayWords(instant, timeZone),
    dayAndTime: (instant) => dayAndTime(instant, timeZone),
    timeSeenFrom: (instant, now) => timeSeenFrom(instant, now, timeZone),
    daySeenFrom: (instant, now) => daySeenFrom(instant, now, timeZone),
    duration: durationWords,
  };
}
