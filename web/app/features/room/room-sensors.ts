import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import type { Sensor } from '#shared/contract/sensors';
import { StudioClock } from '../../core/time/studio-clock';
import type { StudioFormats } from '../../core/time/studio-formats';
import { figure } from '../../core/units/measure-words';
import { DataTable } from '../../ui/data-table';
import { type Status, StatusMark } from '../../ui/status-mark';

const STATE: Record<Sensor['health']['state'], { readonly words: string; readonly status: Status }> = {
  fine: { words: 'fine', status: 'good' },
  silent: { words: 'silent', status: 'silent' },
  stuck: { words: 'stuck on one value', status: 'heat' },
  drifting: { words: 'drifting from the others', status: 'swinging' },
  'never-heard': { words: 'never heard yet', status: 'silent' },
  retired: { words: 'retired', status: 'notice' },
};

/** Sensors of a room and their health. */
@Component({
  selector: 'sr-room-sensors',
  imports: [DataTable, StatusMark],
  template: `<sr-data-table label="Sensors of this room">
    <table class="sr-table">
      <thead>
        <tr>
          <th scope="col">Sensor</th>
          <th scope="col">Health</th>
          <th scope="col">Last heard</th>
          <th scope="col" class="num">{{ formats().unitSign }}</th>
          <th scope="col" class="num">% humidity</th>
          <th scope="col" class="num">Battery</th>
          <th scope="col">Counts for the room</th>
          <th scope="col">Set aside</th>
        </tr>
      </thead>
      <tbody>
        @for (row of rows(); track row.id) {
          <tr>
            <th scope="row">{{ row.name }}</th>
            <td>
              <span class="health"><sr-status-mark [status]="row.status" /> {{ row.health }}</span>
            </td>
            <td>{{ row.heard }}</td>
            <td class="num">{{ row.celsius }}</td>
            <td class="num">{{ row.humidity }}</td>
            <td class="num">{{ row.battery }}</td>
            <td>{{ row.counts }}</td>
            <td>{{ row.aside }}</td>
          </tr>
        }
      </tbody>
    </table>
  </sr-data-table>`,
  styles: `
    .health {
      display: inline-flex;
      gap: 7px;
      align-items: baseline;
      white-space: nowrap;
    }
    .health sr-status-mark {
      align-self: center;
    }
    tbody th {
      color: var(--mat-sys-on-surface);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomSensors {
  readonly sensors = input.required<readonly Sensor[]>();
  readonly formats = input.required<StudioFormats>();

  private readonly clock = inject(StudioClock);
  protected readonly rows = computed(() =>
    this.sensors().map((sensor) => ({
      id: sensor.id,
      name: sensor.name,
      health: STATE[sensor.health.state].words,
      status: STATE[sensor.health.state].status,
      heard:
        sensor.health.lastHeardAt === null
          ? 'never'
          : this.formats().timeSeenFrom(sensor.health.lastHeardAt, this.clock.minute()),
      celsius:
        sensor.health.lastCelsius === null
          ? '–'
          : this.formats().temperatureFigure(sensor.health.lastCelsius),
      humidity: sensor.health.lastHumidity === null ? '–' : sensor.health.lastHumidity.toFixed(0),
      battery: sensor.health.battery === null ? '–' : `${sensor.health.battery.toFixed(0)} %`,
      counts: this.counts(sensor),
      aside: setAside(sensor),
    })),
  );

  /** "yes, offset −0.3 °C" */
  private counts({ trusted, retired, offsetCelsius }: Sensor): string {
    if (retired || !trusted) return 'no';
    if (offsetCelsius === 0) return 'yes';
    const sign = offsetCelsius > 0 ? '+' : '';
    return `yes, offset ${sign}${this.formats().difference(offsetCelsius)}`;
  }
}

/** Readings that were not taken as they came, counted in words. */
function setAside({ health }: Sensor): string {
  const parts = [
    health.futureReadings > 0 ? `${figure(health.futureReadings, 0)} from the future` : '',
    health.conflicts > 0 ? `${figure(health.conflicts, 0)} contradicting` : '',
    health.quarantined > 0 ? `${figure(health.quarantined, 0)} unreadable` : '',
  ].filter((part) => part !== '');
  return parts.length === 0 ? 'none' : parts.join(', ');
}
