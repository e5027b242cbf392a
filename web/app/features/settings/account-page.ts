import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import type { Session as OwnSession, sessionRoutes } from '#shared/contract/session';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Saving } from '../../core/api/saving';
import { Session } from '../../core/session/session';
import { DataTable } from '../../ui/data-table';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { FormField } from '../../ui/form-field';
import { plainTime } from './plain-time';

/** One's own password and the devices one is signed in on. */
@Component({
  selector: 'sr-account-page',
  imports: [DataTable, ErrorNote, FormField, LoadingNote, MatButton, ReactiveFormsModule],
  template: `<section class="sr-sheet" aria-labelledby="who">
      <h2 id="who">{{ session.me()?.name }}</h2>
      <p class="sr-muted">{{ session.me()?.email }}</p>
    </section>
    <section class="sr-sheet" aria-labelledby="password">
      <h2 id="password">Change the password</h2>
      <form class="sr-form" [formGroup]="form" (ngSubmit)="change()" novalidate>
        <sr-form-field
          label="Present password"
          type="password"
          autocomplete="current-password"
          [control]="form.controls.current"
        />
        <sr-form-field
          label="New password"
          type="password"
          autocomplete="new-password"
          hint="At least 8 characters; 15 or more are advised. Every other session ends."
          [control]="form.controls.next"
        />
        @if (saving.fault()) {
          <p role="alert" class="fault">{{ saving.fault() }}</p>
        }
        <div class="sr-actions">
          <button mat-flat-button type="submit" [disabled]="saving.busy()">Change password</button>
        </div>
      </form>
    </section>
    <section class="sr-sheet" aria-labelledby="sessions">
      <h2 id="sessions">Where you are signed in</h2>
      @if (sessions.fault(); as text) {
        <sr-error-note [text]="text" (retry)="load()" />
      } @else if (sessions.value(); as list) {
        <sr-data-table label="Own sessions">
          <table class="sr-table">
            <thead>
              <tr>
                <th scope="col">Device</th>
                <th scope="col">Address</th>
                <th scope="col">Last used</th>
                <th scope="col"><span class="sr-only">End</span></th>
              </tr>
            </thead>
            <tbody>
              @for (one of list; track one.id) {
                <tr>
                  <th scope="row">{{ one.userAgent || 'unknown' }}</th>
                  <td>{{ one.address }}</td>
                  <td>{{ time(one.lastUsedAt) }}</td>
                  <td>
                    @if (one.current) {
                      this one
                    } @else {
                      <button mat-button type="button" (click)="end(one)">End</button>
                    }
                  </td>
                </tr>
              }
            </tbody>
          </table>
        </sr-data-table>
      } @else {
        <sr-loading-note />
      }
    </section>`,
  styleUrl: './settings-sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AccountPage {
  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  protected readonly session = inject(Session);
  protected readonly sessions = new Loadable<OwnSession[]>();
  protected readonly form = inject(NonNullableFormBuilder).group({
    current: ['', Validators.required],
    next: ['', [Validators.required, Validators.minLength(8)]],
  });
  protected readonly saving = new Saving();
  protected readonly time = plainTime;

  constructor() {
    void this.load();
  }

  protected load(): Promise<void> {
    return this.sessions.load(() => this.api.call<typeof sessionRoutes.sessions>('GET', '/api/me/sessions'));
  }

  protected async change(): Promise<void> {
    await this.saving.form(this.form, async () => {
      await this.api.call<typeof sessionRoutes.changePassword>('POST', '/api/me/password', {
        body: this.form.getRawValue(),
      });
      this.form.reset();
      this.announcer.say('The password was changed. Every other session has ended.');
      await this.load();
    });
  }

  protected async end({ id }: OwnSession): Promise<void> {
    await this.saving.act(async () => {
      await this.api.call<typeof sessionRoutes.endSession>('DELETE', '/api/me/sessions/:sessionId', {
        params: { sessionId: id },
      });
      await this.load();
    });
  }
}
