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
import { MatCheckbox } from '@angular/material/checkbox';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import type { ReplyOf } from '#shared/contract/route';
import type { Room, roomRoutes } from '#shared/contract/rooms';
import type { Sensor, sensorRoutes } from '#shared/contract/sensors';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Saving } from '../../core/api/saving';
import { Session } from '../../core/session/session';
import { Formats } from '../../core/time/studio-formats';
import { Confirm } from '../../ui/confirm-dialog';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { FormField } from '../../ui/form-field';
import { Quarantine } from './quarantine';
import { SensorSecret } from './sensor-secret';
import { StudioChoice } from './studio-choice';
import { StudioPicker } from './studio-picker';

interface RoomsAndSensors {
  readonly rooms: readonly Room[];
  readonly sensors: readonly Sensor[];
}

const needed = (value: number) =>
  new FormControl(value, { nonNullable: true, validators: [Validators.required] });

const HEALTH: Readonly<Record<Sensor['health']['state'], string>> = {
  fine: 'fine',
  silent: 'silent',
  stuck: 'stuck on one value',
  drifting: 'drifting from the others',
  'never-heard': 'never heard yet',
  retired: 'retired',
};

/** Sensors of a studio: enrol, calibrate, replace a secret, retire. */
@Component({
  selector: 'sr-sensors-page',
  imports: [
    DataTable,
    EmptyNote,
    ErrorNote,
    FormField,
    LoadingNote,
    MatButton,
    MatCheckbox,
    MatFormField,
    MatLabel,
    MatOption,
    MatSelect,
    Quarantine,
    ReactiveFormsModule,
    SensorSecret,
    StudioPicker,
  ],
  templateUrl: './sensors-page.html',
  styleUrl: './settings-sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SensorsPage {
  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  private readonly confirm = inject(Confirm);
  private readonly session = inject(Session);
  private readonly formatsOf = inject(Formats);
  protected readonly studio = inject(StudioChoice).with('sensors.read');
  protected readonly formats = computed(() => {
    const studio = this.studio();
    return studio ? this.formatsOf.of(studio) : null;
  });
  protected readonly may = computed(() => {
    const id = this.studio()?.id ?? '';
    return {
      write: this.session.may('sensors.write', id),
      quarantine: this.session.may('quarantine.read', id),
    };
  });
  protected readonly all = new Loadable<RoomsAndSensors>();
  protected readonly editing = signal<Sensor | 'new' | null>(null);
  /** The secret of the sensor enrolled or renewed just now; shown until it is put away. */
  protected readonly fresh = signal<ReplyOf<typeof sensorRoutes.enrol> | null>(null);
  protected readonly saving = new Saving();
  protected readonly form = new FormGroup({
    roomId: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    name: new FormControl('', {
      nonNullable: true,
      validators: [Validators.required, Validators.maxLength(80)],
    }),
    trusted: new FormControl(true, { nonNullable: true }),
    offsetCelsius: needed(0),
    offsetHumidity: needed(0),
    intervalSeconds: needed(60),
    acceptLateDays: needed(7),
  });

  constructor() {
    effect(() => {
      const id = this.studio()?.id;
      untracked(() => {
        this.editing.set(null);
        this.fresh.set(null);
        this.all.clear();
        if (id) void this.load(id);
      });
    });
  }

  protected load(studioId: string): Promise<void> {
    const params = { studioId };
    return this.all.load(async () => {
      const [rooms, sensors] = await Promise.all([
        this.api.call<typeof roomRoutes.list>('GET', '/api/studios/:studioId/rooms', { params }),
        this.api.call<typeof sensorRoutes.list>('GET', '/api/studios/:studioId/sensors', { params }),
      ]);
      return { rooms, sensors };
    });
  }

  protected healthOf(sensor: Sensor): string {
    return HEALTH[sensor.health.state];
  }

  protected roomOf(sensor: Sensor): string {
    return this.all.value()?.rooms.find(({ id }) => id === sensor.roomId)?.name ?? '';
  }

  protected heard(sensor: Sensor): string {
    const at = sensor.health.lastHeardAt;
    return at === null ? 'never' : (this.formats()?.dayAndTime(at) ?? '');
  }

  protected edit(sensor: Sensor | 'new'): void {
    this.saving.clear();
    this.fresh.set(null);
    this.editing.set(sensor);
    if (sensor === 'new') {
      this.form.reset({ roomId: this.all.value()?.rooms[0]?.id ?? '' });
    } else {
      const scale = this.formats()?.unit === 'F' ? 1.8 : 1;
      this.form.reset({ ...sensor, offsetCelsius: Math.round(sensor.offsetCelsius * scale * 1000) / 1000 });
    }
  }

  protected async save(): Promise<void> {
    const [editing, studio] = [this.editing(), this.studio()];
    if (editing === null || studio === null) return;
    const { roomId, offsetCelsius, ...rest } = this.form.getRawValue();
    const fields = { ...rest, offsetCelsius: offsetCelsius / (this.formats()?.unit === 'F' ? 1.8 : 1) };
    await this.saving.form(this.form, async () => {
      if (editing === 'new') {
        const enrolled = await this.api.call<typeof sensorRoutes.enrol>(
          'POST',
          '/api/studios/:studioId/sensors',
          {
            params: { studioId: studio.id },
            body: { ...fields, roomId },
          },
        );
        this.fresh.set(enrolled);
      } else {
        await this.api.call<typeof sensorRoutes.change>('PUT', '/api/studios/:studioId/sensors/:sensorId', {
          params: { studioId: studio.id, sensorId: editing.id },
          body: { ...fields, version: editing.version },
        });
      }
      this.editing.set(null);
      this.announcer.say(`${fields.name} was saved.`);
      await this.load(studio.id);
    });
  }

  protected async renew(sensor: Sensor): Promise<void> {
    const answer = await this.confirm.ask({
      title: `New secret for ${sensor.name}?`,
      text: 'The old one stops working. The device stays silent until it has the new one.',
      action: 'Make a new secret',
    });
    if (answer === null) return;
    await this.#act(sensor, async (params) => {
      this.fresh.set(
        await this.api.call<typeof sensorRoutes.newSecret>(
          'POST',
          '/api/studios/:studioId/sensors/:sensorId/secret',
          {
            params,
          },
        ),
      );
    });
  }

  protected async retire(sensor: Sensor): Promise<void> {
    const answer = await this.confirm.ask({
      title: `Retire ${sensor.name}?`,
      text: 'It is let in no more. What it measured stays and counts for its time.',
      action: 'Retire sensor',
    });
    if (answer === null) return;
    await this.#act(sensor, async (params) => {
      await this.api.call<typeof sensorRoutes.retire>('DELETE', '/api/studios/:studioId/sensors/:sensorId', {
        params,
      });
    });
  }

  async #act(
    sensor: Sensor,
    act: (params: { studioId: string; sensorId: string }) => Promise<void>,
  ): Promise<void> {
    await this.saving.act(async () => {
      await act({ studioId: sensor.studioId, sensorId: sensor.id });
      await this.load(sensor.studioId);
    });
  }
}
