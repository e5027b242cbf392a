import { computed, DestroyRef, inject, Injectable, signal } from '@angular/core';
import { CELL_MS } from '#shared/cure/grid';
import { MINUTE_MS } from './zoned-time';

const TICK_MS = 1000;

/**
 * The gateway's time, by which readings, dates and alerts are told. In the demo it may run faster than the wall
 * clock; every live frame sets it right.
 */
@Injectable({ providedIn: 'root' })
export class StudioClock {
  private base = { domain: Date.now(), system: performance.now(), speed: 1 };
  private readonly writableNow = signal(Date.now());

  /** Epoch ms, new every second. */
  readonly now = this.writableNow.asReadonly();
  /** Epoch ms of the present whole minute: for text that need not change every second. */
  readonly minute = computed(() => Math.floor(this.writableNow() / MINUTE_MS) * MINUTE_MS);

  /** Epoch ms of the present ten-minute cell: for dates and walls, which move no faster than the cure. */
  readonly cell = computed(() => Math.floor(this.writableNow() / CELL_MS) * CELL_MS);

  constructor() {
    const timer = setInterval(() => this.tick(), TICK_MS);
    inject(DestroyRef).onDestroy(() => clearInterval(timer));
  }

  /** Sets the clock by the gateway: its time in epoch ms, and its speed when that is told. */
  align(domainAt: number, speed = this.base.speed): void {
    this.base = { domain: domainAt, system: performance.now(), speed };
    this.tick();
  }

  private tick(): void {
    const { domain, system, speed } = this.base;
    this.writableNow.set(Math.round(domain + (performance.now() - system) * speed));
  }
}
