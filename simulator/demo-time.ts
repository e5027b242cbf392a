/** Speeds the desk offers, domain seconds per real second. */
export const SPEEDS = [1, 60, 600, 3600] as const;

/** The demo's time: runs at a speed from an instant on and never backwards. */
export class DemoTime {
  #domainAt: number;
  #realAt: number;
  #speed: number;

  /** @param realNow the system's time, epoch ms */
  constructor(
    domainAt: number,
    speed: number,
    private readonly realNow: () => number,
  ) {
    this.#domainAt = domainAt;
    this.#realAt = realNow();
    this.#speed = speed;
  }

  now(): number {
    return Math.round(this.#domainAt + (this.realNow() - this.#realAt) * this.#speed);
  }

  get speed(): number {
    return this.#speed;
  }

  /** Goes on at another speed from the present instant. */
  setSpeed(speed: number): void {
    this.#domainAt = this.now();
    this.#realAt = this.realNow();
    this.#speed = speed;
  }

  /** What the gateway has to know to show the same time. */
  get setting(): { domainAt: number; realAt: number; speed: number } {
    return { domainAt: Math.round(this.#domainAt), realAt: this.#realAt, speed: this.#speed };
  }
}
