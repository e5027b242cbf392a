import { ChangeDetectionStrategy, Component, effect, inject, input, untracked } from '@angular/core';
import type { ReplyOf } from '#shared/contract/route';
import type { sensorRoutes } from '#shared/contract/sensors';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { DataTable } from '../../ui/data-table';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { plainTime } from './plain-time';

/** Messages of a studio's sensors that could not be taken, with the reason. */
@Component({
  selector: 'sr-quarantine',
  imports: [DataTable, ErrorNote, LoadingNote],
  template: `<section class="sr-sheet" aria-labelledby="quarantine">
    <h2 id="quarantine">Messages that could not be taken</h2>
    @if (messages.fault(); as sentence) {
      <sr-error-note [text]="sentence" (retry)="load()" />
    } @else if (messages.value(); as list) {
      @if (list.length === 0) {
        <p class="sr-muted">None. Everything that was sent could be read.</p>
      } @else {
        <sr-data-table label="Messages that could not be taken">
          <table class="sr-table">
            <thead>
              <tr>
                <th scope="col">Received</th>
                <th scope="col">Why not</th>
                <th scope="col">Message</th>
              </tr>
            </thead>
            <tbody>
              @for (message of list; track message.id) {
                <tr>
                  <td>{{ time(message.receivedAt) }}</td>
                  <td>{{ message.reason }}</td>
                  <td>
                    <code>{{ message.payload }}</code>
                  </td>
                </tr>
              }
            </tbody>
          </table>
        </sr-data-table>
      }
    } @else {
      <sr-loading-note />
    }
  </section>`,
  styleUrl: './settings-sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Quarantine {
  readonly studioId = input.required<string>();

  private readonly api = inject(Api);
  protected readonly messages = new Loadable<ReplyOf<typeof sensorRoutes.quarantine>>();
  protected readonly time = plainTime;

  constructor() {
    effect(() => {
      this.studioId();
      untracked(() => void this.load());
    });
  }

  protected load(): Promise<void> {
    return this.messages.load(() =>
      this.api.call<typeof sensorRoutes.quarantine>('GET', '/api/studios/:studioId/quarantine', {
        params: { studioId: this.studioId() },
        query: { limit: 30 },
      }),
    );
  }
}
