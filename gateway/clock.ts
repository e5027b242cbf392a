import type { DemoClock } from '#shared/contract/telemetry';

/** Time as the product's domain sees it, in epoch milliseconds. Sessions and sockets use the system's time instead. */
export interface Clock {
  now(): number;
  /** Domain seconds per real second; 1 outside the demo. */
  speed(): number;
}

export const systemClock: Clock = { now: () => Date.now(), speed: () => 1 };

/** A clock that the demo's simulator may set and speed up; until then it equals the base clock. */
export class AdjustableClock implements Clock {
  #setting: DemoClock | null = null;

  constructor(private readonly base: Clock = systemClock) {}

  now(): number {
    const real = this.base.now();
    if (this.#setting === null) return real;
    return Math.round(this.#setting.domainAt + (real - this.#setting.realAt) * this.#setting.speed);
  }

  speed(): number {
    return this.#setting?.speed ?? 1;
  }

  set(setting: DemoClock): void {
    this.#setting = setting;
  }
}
