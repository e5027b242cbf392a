import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { MatButton } from '@angular/material/button';
import type { ReplyOf } from '#shared/contract/route';
import type { sensorRoutes } from '#shared/contract/sensors';

/** A sensor's secret, shown once, with settings to try it. */
@Component({
  selector: 'sr-sensor-secret',
  imports: [MatButton],
  template: `<section class="sr-sheet secret" aria-labelledby="secret">
    <h2 id="secret">Secret of {{ enrolled().sensor.name }}</h2>
    <p><b>Shown only now.</b> Put it into the device; it is kept here as a hash.</p>
    <dl>
      <dt>User name and client id</dt>
      <dd>
        <code>{{ enrolled().sensor.deviceId }}</code>
      </dd>
      <dt>Password</dt>
      <dd>
        <code data-secret>{{ enrolled().secret }}</code>
      </dd>
      <dt>Topic</dt>
      <dd>
        <code>{{ enrolled().sensor.topic }}</code>
      </dd>
    </dl>
    <p>To try it from a shell:</p>
    <pre tabindex="0" aria-label="Example command">{{ example() }}</pre>
    <div class="sr-actions">
      <button mat-flat-button type="button" (click)="done.emit()">I have put it away</button>
    </div>
  </section>`,
  styleUrl: './settings-sheet.scss',
  styles: `
    dt {
      color: var(--mat-sys-on-surface-variant);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SensorSecret {
  readonly enrolled = input.required<ReplyOf<typeof sensorRoutes.enrol>>();
  readonly done = output();

  protected readonly example = computed(() => {
    const { sensor, secret } = this.enrolled();
    return `mosquitto_pub -h ${location.hostname} -p 1883 -i ${sensor.deviceId} -u ${sensor.deviceId} -P '${secret}' -q 1 \\
  -t ${sensor.topic} -m '{"t": 21.4, "rh": 48.2}'`;
  });
}
