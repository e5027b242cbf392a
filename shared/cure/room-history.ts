import { ClassIntegrals, type StretchSums } from '#shared/cure/class-integrals';
import { Forecast, type ForecastStart } from '#shared/cure/forecast';
import { fillGap, type FilledGap, learnUsualDay } from '#shared/cure/gaps';
import type { KineticClass } from '#shared/cure/kinetics';
import { GrowingSum } from '#shared/cure/growing-sum';

/** A gap as one batch sees it. */
export interface GapInStretch {
  readonly gap: FilledGap;
  readonly from: number;
  readonly to: number;
}

/**
 * The ten-minute temperatures of one room and their running integrals, one set per kinetic class, so that the cure age
 * gained between two cells is a difference of two numbers however long the history is. A late reading rebuilds
 * only what comes after it; sums are brought up to date when somebody asks.
 */
export class RoomHistory {
  static #count = 0;
  /** Tells histories apart: one that was built anew is another, even of the same room. */
  readonly serial = ++RoomHistory.#count;
  #celsius: Float64Array;
  #filled: Float64Array;
  #length = 0;
  /** Cells up to here (index) are filled. */
  #filledTo = 0;
  #gaps: FilledGap[] = [];
  #rewrites = 0;
  readonly #classes = new Map<KineticClass, ClassIntegrals>();
  readonly #degreeHours = new Map<number, GrowingSum>();
  readonly #forecasts = new Map<KineticClass, Forecast>();
  #forecastStart: ForecastStart | null = null;

  /** @param origin first cell of the history */
  constructor(readonly origin: number) {
    this.#celsius = new Float64Array(1024).fill(NaN);
    this.#filled = new Float64Array(1024).fill(NaN);
  }

  /** Cell after the last one of the history. */
  get end(): number {
    return this.origin + this.#length;
  }

  /** Counts up whenever a cell that had been part of the history changes. */
  get rewrites(): number {
    return this.#rewrites;
  }

  /** Lets time go on: cells up to `end` (not included) are part of the history, gaps where nothing was set. */
  advanceTo(end: number): void {
    const length = end - this.origin;
    if (length <= this.#length) return;
    this.#reserve(length);
    // A gap at the end grows: how it is filled depends on its length.
    this.#invalidate(this.#length);
    this.#length = length;
  }

  /** Sets the mean of a cell in °C, or null when nothing was observed; later cells are only known once set or advanced to. */
  set(cell: number, celsius: number | null): void {
    if (cell < this.origin)
      throw new RangeError(`Cell ${cell} lies before the history's first, ${this.origin}.`);
    const index = cell - this.origin;
    const value = celsius ?? NaN;
    if (index < this.#length) {
      const old = this.#celsius[index] ?? NaN;
      if (old === value || (Number.isNaN(old) && Number.isNaN(value))) return;
      this.#rewrites++;
    } else {
      this.advanceTo(cell + 1);
    }
    this.#celsius[index] = value;
    this.#invalidate(index);
  }

  /** Observed mean of a cell, NaN in a gap. */
  readonly observed = (cell: number): number => this.#celsius[cell - this.origin] ?? NaN;

  /** Observed or filled temperature; NaN when the room has never been observed. */
  celsius(cell: number): number {
    this.#fill();
    return this.#filled[cell - this.origin] ?? NaN;
  }

  /** Whether the room has any reading at all. */
  get known(): boolean {
    this.#fill();
    return this.#length > 0 && !Number.isNaN(this.#filled[0] ?? NaN);
  }

  /** Equivalent days and their sensitivities gained in the cells [from, to) of the history. */
  sums(kinetic: KineticClass, from: number, to: number): StretchSums {
    return this.#classOf(kinetic).between(this.#index(from), this.#index(to));
  }

  /** First cell in [from, to) after which the days gained since `from` reach `days`; null when they do not. */
  cellReaching(kinetic: KineticClass, from: number, to: number, days: number): number | null {
    const index = this.#classOf(kinetic).firstReaching(this.#index(from), this.#index(to), days);
    return index === null ? null : this.origin + index;
  }

  /** °C·h above a limit in the cells [from, to), gaps included as filled. */
  degreeHours(limit: number, from: number, to: number): number {
    this.#fill();
    let sum = this.#degreeHours.get(limit);
    if (!sum) {
      sum = new GrowingSum((index) => Math.max(0, (this.#filled[index] ?? NaN) - limit) / 6);
      this.#degreeHours.set(limit, sum);
    }
    return sum.between(this.#index(from), this.#index(to));
  }

  /** Gaps that reach into the cells [from, to), cut to them. */
  gapsBetween(from: number, to: number): GapInStretch[] {
    this.#fill();
    const found: GapInStretch[] = [];
    for (let at = this.#firstGapEndingAfter(from); at < this.#gaps.length; at++) {
      const gap = this.#gaps[at];
      if (gap === undefined || gap.from >= to) break;
      found.push({ gap, from: Math.max(gap.from, from), to: Math.min(gap.to, to) });
    }
    return found;
  }

  /** Forecast for a class from a cell on (the end of the history, or an earlier cell to look back at an old estimate). */
  forecast(kinetic: KineticClass, from: number): Forecast {
    this.#fill();
    if (this.#forecastStart?.cell !== from) {
      this.#forecasts.clear();
      this.#forecastStart = {
        cell: from,
        celsius: this.celsius(from - 1),
        hours: learnUsualDay(this.observed, this.origin, from).hours,
      };
    }
    let forecast = this.#forecasts.get(kinetic);
    if (!forecast) {
      forecast = new Forecast(this.#forecastStart, kinetic);
      this.#forecasts.set(kinetic, forecast);
    }
    return forecast;
  }

  #index(cell: number): number {
    const index = cell - this.origin;
    if (!(index >= 0 && index <= this.#length)) {
      throw new RangeError(`Cell ${cell} is not in the history ${this.origin} to ${this.end}.`);
    }
    return index;
  }

  #classOf(kinetic: KineticClass): ClassIntegrals {
    this.#fill();
    let sums = this.#classes.get(kinetic);
    if (!sums) {
      sums = new ClassIntegrals(
        kinetic,
        (index) => this.#filled[index] ?? NaN,
        () => this.#length,
      );
      this.#classes.set(kinetic, sums);
    }
    return sums;
  }

  #reserve(length: number): void {
    if (length <= this.#celsius.length) return;
    const capacity = Math.max(length, this.#celsius.length * 2);
    const [celsius, filled] = [new Float64Array(capacity).fill(NaN), new Float64Array(capacity).fill(NaN)];
    celsius.set(this.#celsius);
    filled.set(this.#filled);
    this.#celsius = celsius;
    this.#filled = filled;
  }

  /** Forgets everything derived from a cell (index) on, and the gap that touches it. */
  #invalidate(index: number): void {
    this.#forecastStart = null;
    this.#forecasts.clear();
    // Before the first reading there was nothing to fill with; the first one fills it all.
    const unknown = this.#filledTo > 0 && Number.isNaN(this.#filled[0] ?? NaN);
    let from = unknown ? 0 : Math.min(index, this.#filledTo);
    for (
      let last = this.#gaps.at(-1);
      last !== undefined && last.to - this.origin >= from;
      last = this.#gaps.at(-1)
    ) {
      from = Math.min(from, last.from - this.origin);
      this.#gaps.pop();
    }
    this.#filledTo = from;
    for (const sums of this.#classes.values()) sums.forgetFrom(from);
    for (const sum of this.#degreeHours.values()) sum.forgetFrom(from);
  }

  #fill(): void {
    while (this.#filledTo < this.#length) {
      const index = this.#filledTo;
      const celsius = this.#celsius[index] ?? NaN;
      if (!Number.isNaN(celsius)) {
        this.#filled[index] = celsius;
        this.#filledTo++;
        continue;
      }
      let to = index;
      while (to < this.#length && Number.isNaN(this.#celsius[to] ?? NaN)) to++;
      const [from, end] = [this.origin + index, this.origin + to];
      const before = index === 0 ? NaN : (this.#celsius[index - 1] ?? NaN);
      const after = to < this.#length ? (this.#celsius[to] ?? NaN) : NaN;
      const gap = fillGap(from, end, before, after, learnUsualDay(this.observed, this.origin, from));
      if (gap) {
        this.#filled.set(gap.celsius, index);
        this.#gaps.push(gap);
      } else {
        this.#filled.fill(NaN, index, to);
      }
      this.#filledTo = to;
    }
  }

  #firstGapEndingAfter(cell: number): number {
    let [low, high] = [0, this.#gaps.length];
    while (low < high) {
      const middle = (low + high) >> 1;
      if ((this.#gaps[middle]?.to ?? Infinity) <= cell) low = middle + 1;
      else high = middle;
    }
    return low;
  }
}
