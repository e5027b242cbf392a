import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  signal,
  untracked,
} from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import type { Room, RoomLimits, roomRoutes } from '#shared/contract/rooms';
import { fromFahrenheit, toFahrenheit } from '#shared/units/temperature';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Saving } from '../../core/api/saving';
import { Formats } from '../../core/time/studio-formats';
import { Confirm } from '../../ui/confirm-dialog';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { FormField } from '../../ui/form-field';
import { StudioChoice } from './studio-choice';
import { StudioPicker } from './studio-picker';

const needed = (value: number) =>
  new FormControl(value, { nonNullable: true, validators: [Validators.required] });

/** What a new room starts with; common practice, no source. °C, %, K, days. */
const FRESH: RoomLimits = {
  bandLow: 18,
  bandHigh: 23,
  heatLimit: null,
  humidityHigh: 65,
  swingLimit: 5,
  slipDays: 2,
};

/** Rooms of a studio and their limits. */
@Component({
  selector: 'sr-room-settings-page',
  imports: [
    DataTable,
    EmptyNote,
    ErrorNote,
    FormField,
    LoadingNote,
    MatButton,
    ReactiveFormsModule,
    RouterLink,
    StudioPicker,
  ],
  templateUrl: './room-settings-page.html',
  styleUrl: './settings-sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomSettingsPage {
  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  private readonly confirm = inject(Confirm);
  private readonly formatsOf = inject(Formats);
  protected readonly studio = inject(StudioChoice).with('rooms.write');
  protected readonly formats = computed(() => {
    const studio = this.studio();
    return studio ? this.formatsOf.of(studio) : null;
  });
  protected readonly rooms = new Loadable<Room[]>();
  protected readonly editing = signal<Room | 'new' | null>(null);
  protected readonly saving = new Saving();
  protected readonly form = new FormGroup({
    name: new FormControl('', {
      nonNullable: true,
      validators: [Validators.required, Validators.maxLength(80)],
    }),
    position: needed(0),
    notes: new FormControl('', { nonNullable: true }),
    limits: new FormGroup({
      bandLow: needed(0),
      bandHigh: needed(0),
      heatLimit: new FormControl<number | null>(null),
      humidityHigh: needed(0),
      swingLimit: needed(0),
      slipDays: needed(0),
    }),
  });

  constructor() {
    effect(() => {
      const id = this.studio()?.id;
      untracked(() => {
        this.editing.set(null);
        this.rooms.clear();
        if (id) void this.load(id);
      });
    });
  }

  protected load(studioId: string): Promise<void> {
    return this.rooms.load(() =>
      this.api.call<typeof roomRoutes.list>('GET', '/api/studios/:studioId/rooms', { params: { studioId } }),
    );
  }

  protected edit(room: Room | 'new'): void {
    this.saving.clear();
    this.editing.set(room);
    const limits = room === 'new' ? FRESH : room.limits;
    this.form.reset({
      name: room === 'new' ? '' : room.name,
      position: room === 'new' ? (this.rooms.value()?.length ?? 0) : room.position,
      notes: room === 'new' ? '' : room.notes,
      limits: {
        ...limits,
        bandLow: this.shown(limits.bandLow),
        bandHigh: this.shown(limits.bandHigh),
        heatLimit: limits.heatLimit === null ? null : this.shown(limits.heatLimit),
        swingLimit: rounded(limits.swingLimit * (this.fahrenheit() ? 1.8 : 1)),
      },
    });
  }

  protected async save(): Promise<void> {
    const [editing, studio] = [this.editing(), this.studio()];
    if (editing === null || studio === null) return;
    const { limits, ...rest } = this.form.getRawValue();
    const body = {
      ...rest,
      limits: {
        ...limits,
        bandLow: this.celsius(limits.bandLow),
        bandHigh: this.celsius(limits.bandHigh),
        heatLimit: limits.heatLimit === null ? null : this.celsius(limits.heatLimit),
        swingLimit: limits.swingLimit / (this.fahrenheit() ? 1.8 : 1),
      },
    };
    await this.saving.form(this.form, async () => {
      if (editing === 'new') {
        await this.api.call<typeof roomRoutes.create>('POST', '/api/studios/:studioId/rooms', {
          params: { studioId: studio.id },
          body,
        });
      } else {
        await this.api.call<typeof roomRoutes.change>('PUT', '/api/studios/:studioId/rooms/:roomId', {
          params: { studioId: studio.id, roomId: editing.id },
          body: { ...body, version: editing.version },
        });
      }
      this.editing.set(null);
      this.announcer.say(`${body.name} was saved.`);
      await this.load(studio.id);
    });
  }

  protected async remove(room: Room): Promise<void> {
    const studio = this.studio();
    const answer = await this.confirm.ask({
      title: `Remove ${room.name}?`,
      text: 'A room with racks, sensors or a past cannot be removed.',
      action: 'Remove room',
    });
    if (answer === null || studio === null) return;
    await this.saving.act(async () => {
      await this.api.call<typeof roomRoutes.remove>('DELETE', '/api/studios/:studioId/rooms/:roomId', {
        params: { studioId: studio.id, roomId: room.id },
      });
      this.announcer.say(`${room.name} was removed.`);
      await this.load(studio.id);
    });
  }

  private fahrenheit(): boolean {
    return this.formats()?.unit === 'F';
  }

  private shown(celsius: number): number {
    return rounded(this.fahrenheit() ? toFahrenheit(celsius) : celsius);
  }

  private celsius(shown: number): number {
    return this.fahrenheit() ? fromFahrenheit(shown) : shown;
  }
}

function rounded(value: number): number {
  return Math.round(value * 100) / 100;
}
