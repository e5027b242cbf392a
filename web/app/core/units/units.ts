import { computed, inject, Injectable, signal } from '@angular/core';
import { Session } from '../session/session';

export type TemperatureUnit = 'C' | 'F';
/** null: each studio in its own unit. */
export type UnitChoice = TemperatureUnit | null;

const KEY = 'stillroom.unit.';

/** °C or °F: a person's own choice on this device goes before the studio's unit. */
@Injectable({ providedIn: 'root' })
export class Units {
  private readonly session = inject(Session);
  private readonly chosen = signal<ReadonlyMap<string, UnitChoice>>(new Map());

  /** The choice of the person signed in. */
  readonly choice = computed<UnitChoice>(() => {
    const id = this.session.me()?.id;
    if (id === undefined) return null;
    const here = this.chosen().get(id);
    return here === undefined ? remembered(id) : here;
  });

  /** Sets the unit of the person signed in; null follows each studio. */
  choose(choice: UnitChoice): void {
    const id = this.session.me()?.id;
    if (id === undefined) return;
    if (choice === null) localStorage.removeItem(KEY + id);
    else localStorage.setItem(KEY + id, choice);
    this.chosen.update((before) => new Map(before).set(id, choice));
  }

  /** The unit to show for a studio. */
  unitFor(studioUnit: TemperatureUnit): TemperatureUnit {
    return this.choice() ?? studioUnit;
  }
}

function remembered(personId: string): UnitChoice {
  const kept = localStorage.getItem(KEY + personId);
  return kept === 'C' || kept === 'F' ? kept : null;
}
