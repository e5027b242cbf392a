import { ChangeDetectionStrategy, Component, inject, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import type { AuditEntry, auditRoutes } from '#shared/contract/audit';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { plainTime } from './plain-time';

const A_PAGE = 50;

/** Who changed what, when, from where; newest first. */
@Component({
  selector: 'sr-audit-page',
  imports: [DataTable, EmptyNote, ErrorNote, LoadingNote, MatButton],
  template: `<section class="sr-sheet" aria-labelledby="audit">
    <h2 id="audit">Audit trail</h2>
    @if (entries.fault(); as sentence) {
      <sr-error-note [text]="sentence" (retry)="load()" />
    } @else if (entries.value(); as list) {
      @if (list.length === 0) {
        <sr-empty-note title="Nothing was changed yet." />
      } @else {
        <sr-data-table label="Audit trail">
          <table class="sr-table">
            <thead>
              <tr>
                <th scope="col">When</th>
                <th scope="col">Who</th>
                <th scope="col">What</th>
                <th scope="col">From</th>
                <th scope="col">To</th>
                <th scope="col">Where from</th>
              </tr>
            </thead>
            <tbody>
              @for (entry of list; track entry.id) {
                <tr>
                  <td>{{ time(entry.at) }}</td>
                  <td>{{ entry.who }}</td>
                  <th scope="row">{{ entry.action }}: {{ entry.thing }}</th>
                  <td>
                    <code>{{ text(entry.from) }}</code>
                  </td>
                  <td>
                    <code>{{ text(entry.to) }}</code>
                  </td>
                  <td>{{ entry.address }}</td>
                </tr>
              }
            </tbody>
          </table>
        </sr-data-table>
        @if (more()) {
          <div class="sr-actions">
            <button mat-stroked-button type="button" (click)="older(list)">Show older ones</button>
          </div>
        }
      }
    } @else {
      <sr-loading-note />
    }
  </section>`,
  styleUrl: './settings-sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AuditPage {
  private readonly api = inject(Api);
  protected readonly entries = new Loadable<AuditEntry[]>();
  protected readonly more = signal(false);
  protected readonly time = plainTime;

  constructor() {
    void this.load();
  }

  protected load(): Promise<void> {
    return this.entries.load(() => this.page());
  }

  protected older(list: readonly AuditEntry[]): Promise<void> {
    return this.entries.load(async () => [...list, ...(await this.page(list.at(-1)?.id))]);
  }

  /** What was there before and after, as short as it can be told. */
  protected text(value: unknown): string {
    if (value === null || value === undefined) return '–';
    const written = JSON.stringify(value);
    return written.length > 240 ? `${written.slice(0, 240)}…` : written;
  }

  private async page(before?: string): Promise<AuditEntry[]> {
    const page = await this.api.call<typeof auditRoutes.list>('GET', '/api/audit', {
      query: { limit: A_PAGE, ...(before === undefined ? {} : { before }) },
    });
    this.more.set(page.length === A_PAGE);
    return page;
  }
}
