import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import { type Status, StatusMark } from './status-mark';

/** A state in words: what is the matter in bold, then the figures. */
@Component({
  selector: 'sr-state-sentence',
  imports: [StatusMark],
  template: `<p>
    @if (marked()) {
      <sr-status-mark [status]="status()" />
    }
    <span
      ><b [class]="status()">{{ lead() }}</b> {{ rest() }}</span
    >
  </p>`,
  styles: `
    p {
      display: flex;
      gap: 8px;
      align-items: baseline;
    }
    sr-status-mark {
      align-self: flex-start;
      margin-block-start: 0.22em;
    }
    b {
      font-weight: 600;
    }
    .heat {
      color: var(--sr-heat);
    }
    .cold {
      color: var(--sr-cold);
    }
    .damp {
      color: var(--sr-damp);
    }
    .swinging,
    .due {
      color: var(--sr-copper);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class StateSentence {
  readonly status = input.required<Status>();
  readonly lead = input.required<string>();
  readonly rest = input('');
  /** Draw the shape before the sentence. */
  readonly marked = input(true);
}
