import { computed, inject, Injectable, type Signal } from '@angular/core';
import type { BatchCard } from '#shared/contract/batches';
import { CELL_MS } from '#shared/cure/grid';
import { nextGate } from '#shared/words/gate-words';
import { readyLine } from '#shared/words/rack-readiness';
import { roomState, type StateWords } from '#shared/words/room-state';
import { StudioClock } from '../time/studio-clock';
import { Formats, type StudioFormats } from '../time/studio-formats';
import type { RoomLive } from './room-live';
import type { StudioLive } from './studio-live';

const NONE = '–';

/** Figures as text without their unit. */
export interface RoomFigureTexts {
  readonly temperature: string;
  readonly humidity: string;
  readonly dewPoint: string;
  readonly unit: string;
  /** How old they are when they are not live, e.g. "14 min"; else ''. */
  readonly ago: string;
}

/** What a room's drawing says, as signals that change only when their text does. */
export interface RoomText {
  readonly formats: Signal<StudioFormats>;
  readonly figures: Signal<RoomFigureTexts>;
  readonly state: Signal<StateWords>;
  /** The ribbon in words. */
  readonly ribbon: Signal<string>;
  /** The line under the wall, or null when there is nothing to say. */
  readonly ready: Signal<StateWords | null>;
  /** What a block says; new when a date's wording may have changed. */
  readonly blockWords: Signal<(batch: BatchCard) => { what: string; when: string; label: string }>;
}

/** Writes what a live room shows, in the studio's zone and the person's unit. */
@Injectable({ providedIn: 'root' })
export class RoomTexts {
  private readonly allFormats = inject(Formats);
  private readonly clock = inject(StudioClock);

  of(studio: StudioLive, room: RoomLive): RoomText {
    const formats = computed(() => this.allFormats.of(studio.studio()));
    return {
      formats,
      figures: computed(() => this.figures(room, formats()), { equal: sameTexts }),
      state: computed(
        () =>
          roomState(
            { ...room.info(), now: room.now(), batches: room.batches(), racks: room.info().racks.length },
            formats(),
            this.clock.minute(),
          ),
        { equal: sameTexts },
      ),
      ribbon: computed(() => ribbonInWords(room.ribbon().celsius, formats())),
      ready: computed(() => readyLine(room.info().racks, room.batches(), formats(), this.clock.cell()), {
        equal: (a, b) => a === b || (a !== null && b !== null && sameTexts(a, b)),
      }),
      blockWords: computed(() => {
        const now = this.clock.cell();
        const widened = room.stale();
        return (batch) => blockWords(batch, formats(), now, widened);
      }),
    };
  }

  private figures(room: RoomLive, formats: StudioFormats): RoomFigureTexts {
    const now = room.now();
    const figure = (value: number | null, write: (value: number) => string) =>
      value === null ? NONE : write(value);
    return {
      temperature: figure(now.celsius, formats.temperatureFigure),
      humidity: figure(now.humidity, (value) => value.toFixed(0)),
      dewPoint: figure(now.dewPoint, formats.temperatureFigure),
      unit: formats.unitSign,
      ago: now.stale && now.at !== null ? formats.duration(this.clock.minute() - Date.parse(now.at)) : '',
    };
  }
}

function blockWords(batch: BatchCard, formats: StudioFormats, now: number, widened: boolean) {
  const { what, when, sentence } = nextGate(batch, formats, now, widened);
  const parts = [
    batch.code,
    batch.designName ?? '',
    `${batch.vessels} vessels`,
    batch.hardening === null ? '' : `hardened ${(batch.hardening * 100).toFixed(0)} %`,
    batch.scent === null ? '' : `scent settled ${(batch.scent * 100).toFixed(0)} %`,
    sentence,
    batch.atRisk ? 'at risk of frosting' : '',
  ];
  return { what, when, label: parts.filter((part) => part !== '').join(', ') };
}

/** "Temperature of the last 24 hours: 19.8 to 26.3 °C, 2 h without readings." */
function ribbonInWords(celsius: readonly (number | null)[], formats: StudioFormats): string {
  const known = celsius.filter((value) => value !== null);
  if (known.length === 0) return 'No temperature in the last 24 hours.';
  const missing = (celsius.length - known.length) * CELL_MS;
  const gap = missing === 0 ? '' : `, ${formats.duration(missing)} without readings`;
  const [low, high] = [Math.min(...known), Math.max(...known)];
  return `Temperature of the last 24 hours: ${formats.temperatureFigure(low)} to ${formats.temperature(high)}${gap}.`;
}

function sameTexts<T extends object>(a: T, b: T): boolean {
  return Object.entries(a).every(([key, value]) => value === b[key as keyof T]);
}
