import { ChangeDetectionStrategy, Component, inject, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatError, MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { RouterLink } from '@angular/router';
import type { sessionRoutes } from '#shared/contract/session';
import { Api } from '../../core/api/api';
import { showFieldErrors } from '../../core/api/api-error';
import { controlError } from '../../ui/control-error';
import { FrontPage } from './front-page';

@Component({
  selector: 'sr-forgot-password-page',
  imports: [
    FrontPage,
    MatButton,
    MatError,
    MatFormField,
    MatInput,
    MatLabel,
    ReactiveFormsModule,
    RouterLink,
  ],
  template: `<sr-front-page heading="Forgotten password" intro="A link to set a new one comes by e-mail.">
    @if (sentTo()) {
      <p role="status">
        If {{ sentTo() }} belongs to somebody here, a link is on its way. It works once and for one hour.
      </p>
      <p><a routerLink="/sign-in">Back to the sign-in</a></p>
    } @else {
      <form class="sr-form" [formGroup]="form" (ngSubmit)="submit()" novalidate>
        <mat-form-field subscriptSizing="dynamic">
          <mat-label>E-mail</mat-label>
          <input
            matInput
            type="email"
            formControlName="email"
            autocomplete="username"
            required
            maxlength="200"
          />
          <mat-error>{{ error() }}</mat-error>
        </mat-form-field>
        @if (fault()) {
          <p class="fault" role="alert">{{ fault() }}</p>
        }
        <div class="sr-actions">
          <button mat-flat-button type="submit" [disabled]="busy()">Send the link</button>
          <a routerLink="/sign-in">Back to the sign-in</a>
        </div>
      </form>
    }
  </sr-front-page>`,
  styles: `
    .fault {
      color: var(--mat-sys-error);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ForgotPasswordPage {
  private readonly api = inject(Api);
  protected readonly form = inject(NonNullableFormBuilder).group({
    email: ['', [Validators.required, Validators.email]],
  });
  protected readonly busy = signal(false);
  protected readonly fault = signal<string | null>(null);
  protected readonly sentTo = signal<string | null>(null);

  protected error(): string {
    return controlError(this.form.controls.email);
  }

  protected async submit(): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.busy()) return;
    this.busy.set(true);
    this.fault.set(null);
    const { email } = this.form.getRawValue();
    try {
      await this.api.call<typeof sessionRoutes.forgotPassword>('POST', '/api/password/forgot', {
        body: { email },
        anonymous: true,
      });
      this.sentTo.set(email);
    } catch (error) {
      this.fault.set(showFieldErrors(error, this.form));
    } finally {
      this.busy.set(false);
    }
  }
}
