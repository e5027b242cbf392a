import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { AlertKind, Rule } from '#shared/contract/alerts';
import type { RoomNow } from '#shared/contract/overview';
import type { RoomLimits } from '#shared/contract/rooms';
import type { StudioFormats } from '../../core/time/studio-formats';

const KIND: Record<AlertKind, string> = {
  'too-warm': 'Too warm',
  'too-cold': 'Too cold',
  'too-damp': 'Too damp',
  condensation: 'Close to the dew point',
  swinging: 'Swinging',
  silent: 'Sensor silent',
  stuck: 'Sensor stuck',
  battery: 'Battery low',
  'intake-silent': 'No sensor heard',
};

/** Limits of a room, the rules that watch them, and whom they reach. */
@Component({
  selector: 'sr-room-limits-list',
  template: `<dl>
      @for (limit of list(); track limit.name) {
        <div>
          <dt>{{ limit.name }}</dt>
          <dd>{{ limit.value }}</dd>
        </div>
      }
    </dl>
    @if (rules(); as rules) {
      <p>{{ watched() }}</p>
    }
    @if (recipients()) {
      <p>{{ recipients() }}</p>
    }`,
  styles: `
    :host {
      display: grid;
      gap: 10px;
    }
    dl {
      display: grid;
      gap: 4px;
      max-inline-size: 520px;
    }
    div {
      display: flex;
      gap: 12px;
      justify-content: space-between;
      padding-block: 4px;
      border-block-end: 1px solid var(--mat-sys-outline-variant);
    }
    dt {
      color: var(--mat-sys-on-surface-variant);
    }
    dd {
      text-align: end;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomLimitsList {
  readonly limits = input.required<RoomLimits>();
  readonly now = input.required<RoomNow>();
  readonly formats = input.required<StudioFormats>();
  /** null where they may not be read. */
  readonly rules = input<readonly Rule[] | null>(null);
  /** Whom alerts reach, in a sentence; '' where it may not be read. */
  readonly recipients = input('');

  protected readonly list = computed(() => {
    const limits = this.limits();
    const f = this.formats();
    const { heatLimit } = this.now();
    return [
      { name: 'Band', value: `${f.temperatureFigure(limits.bandLow)} to ${f.temperature(limits.bandHigh)}` },
      {
        name: 'Heat limit in force',
        value:
          heatLimit === null
            ? 'none: nothing here frosts'
            : `${f.temperature(heatLimit)}${heatLimit === limits.heatLimit ? ', the room’s own' : ''}`,
      },
      { name: 'Highest humidity', value: f.humidity(limits.humidityHigh) },
      { name: 'Largest calm swing in a day', value: f.difference(limits.swingLimit) },
      { name: 'Dates may slip by', value: `${limits.slipDays} ${limits.slipDays === 1 ? 'day' : 'days'}` },
    ];
  });

  /** "Watched: too warm (after 15 min), too cold (after 2 h). Not watched: battery low." */
  protected readonly watched = computed(() => {
    const rules = this.rules() ?? [];
    const on = rules
      .filter((rule) => rule.enabled)
      .map(
        (rule) =>
          `${KIND[rule.kind].toLowerCase()} (${rule.onDelayMinutes === 0 ? 'at once' : `after ${this.formats().duration(rule.onDelayMinutes * 60_000)}`})`,
      );
    const off = rules.filter((rule) => !rule.enabled).map((rule) => KIND[rule.kind].toLowerCase());
    return [
      on.length > 0 ? `Watched: ${on.join(', ')}.` : 'Nothing is watched here.',
      off.length > 0 ? `Not watched: ${off.join(', ')}.` : '',
    ].join(' ');
  });
}
