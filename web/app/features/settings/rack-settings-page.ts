import { ChangeDetectionStrategy, Component, effect, inject, signal, untracked } from '@angular/core';
import { FormArray, FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import type { Rack, rackRoutes } from '#shared/contract/racks';
import type { Room, roomRoutes } from '#shared/contract/rooms';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Saving } from '../../core/api/saving';
import { Confirm } from '../../ui/confirm-dialog';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { FormField } from '../../ui/form-field';
import { StudioChoice } from './studio-choice';
import { StudioPicker } from './studio-picker';

interface RoomsAndRacks {
  readonly rooms: readonly Room[];
  readonly racks: readonly Rack[];
}

const shelf = (capacity: number, id: string | null) =>
  new FormGroup({
    id: new FormControl(id),
    capacity: new FormControl(capacity, {
      nonNullable: true,
      validators: [Validators.required, Validators.min(1), Validators.max(5000)],
    }),
  });

const USUAL_CAPACITY = 30;

/** Racks of a studio with their shelves. */
@Component({
  selector: 'sr-rack-settings-page',
  imports: [
    DataTable,
    EmptyNote,
    ErrorNote,
    FormField,
    LoadingNote,
    MatButton,
    MatFormField,
    MatLabel,
    MatOption,
    MatSelect,
    ReactiveFormsModule,
    StudioPicker,
  ],
  templateUrl: './rack-settings-page.html',
  styleUrl: './settings-sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RackSettingsPage {
  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  private readonly confirm = inject(Confirm);
  protected readonly studio = inject(StudioChoice).with('racks.write');
  protected readonly all = new Loadable<RoomsAndRacks>();
  protected readonly editing = signal<Rack | 'new' | null>(null);
  protected readonly saving = new Saving();
  protected readonly form = new FormGroup({
    roomId: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    name: new FormControl('', {
      nonNullable: true,
      validators: [Validators.required, Validators.maxLength(80)],
    }),
    position: new FormControl(0, { nonNullable: true, validators: [Validators.required] }),
    shelves: new FormArray([shelf(USUAL_CAPACITY, null)]),
  });

  constructor() {
    effect(() => {
      const id = this.studio()?.id;
      untracked(() => {
        this.editing.set(null);
        this.all.clear();
        if (id) void this.load(id);
      });
    });
  }

  protected load(studioId: string): Promise<void> {
    const params = { studioId };
    return this.all.load(async () => {
      const [rooms, racks] = await Promise.all([
        this.api.call<typeof roomRoutes.list>('GET', '/api/studios/:studioId/rooms', { params }),
        this.api.call<typeof rackRoutes.list>('GET', '/api/studios/:studioId/racks', { params }),
      ]);
      return { rooms, racks };
    });
  }

  protected racksOf({ racks }: RoomsAndRacks, room: Room): readonly Rack[] {
    return racks.filter(({ roomId }) => roomId === room.id);
  }

  protected capacityOf(rack: Rack): string {
    const vessels = rack.shelves.reduce((sum, { capacity }) => sum + capacity, 0);
    return `${rack.shelves.length} ${rack.shelves.length === 1 ? 'shelf' : 'shelves'}, ${vessels} vessels`;
  }

  protected edit(rack: Rack | 'new'): void {
    this.saving.clear();
    this.editing.set(rack);
    this.form.controls.shelves.clear();
    if (rack === 'new') {
      for (let count = 0; count < 4; count++) this.addShelf();
      const roomId = this.all.value()?.rooms[0]?.id ?? '';
      this.form.patchValue({ roomId, name: '', position: this.all.value()?.racks.length ?? 0 });
    } else {
      for (const { id, capacity } of rack.shelves) this.form.controls.shelves.push(shelf(capacity, id));
      this.form.patchValue({ roomId: rack.roomId, name: rack.name, position: rack.position });
    }
    this.form.markAsUntouched();
  }

  protected addShelf(): void {
    this.form.controls.shelves.push(shelf(USUAL_CAPACITY, null));
  }

  protected async save(): Promise<void> {
    const [editing, studio] = [this.editing(), this.studio()];
    if (editing === null || studio === null) return;
    const { roomId, name, position, shelves } = this.form.getRawValue();
    const body = {
      name,
      position,
      shelves: shelves.map(({ id, capacity }) => (id === null ? { capacity } : { id, capacity })),
    };
    await this.saving.form(this.form, async () => {
      if (editing === 'new') {
        await this.api.call<typeof rackRoutes.create>('POST', '/api/studios/:studioId/rooms/:roomId/racks', {
          params: { studioId: studio.id, roomId },
          body,
        });
      } else {
        await this.api.call<typeof rackRoutes.change>('PUT', '/api/studios/:studioId/racks/:rackId', {
          params: { studioId: studio.id, rackId: editing.id },
          body: { ...body, version: editing.version },
        });
      }
      this.editing.set(null);
      this.announcer.say(`${name} was saved.`);
      await this.load(studio.id);
    });
  }

  protected async remove(rack: Rack): Promise<void> {
    const studio = this.studio();
    const answer = await this.confirm.ask({
      title: `Remove ${rack.name}?`,
      text: 'A rack on which a batch stands or once stood cannot be removed.',
      action: 'Remove rack',
    });
    if (answer === null || studio === null) return;
    await this.saving.act(async () => {
      await this.api.call<typeof rackRoutes.remove>('DELETE', '/api/studios/:studioId/racks/:rackId', {
        params: { studioId: studio.id, rackId: rack.id },
      });
      this.announcer.say(`${rack.name} was removed.`);
      await this.load(studio.id);
    });
  }
}
