import { ChangeDetectionStrategy, Component, inject, input, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { Router, RouterLink } from '@angular/router';
import type { sessionRoutes } from '#shared/contract/session';
import { Api } from '../../core/api/api';
import { showFieldErrors } from '../../core/api/api-error';
import { FrontPage } from './front-page';
import { PasswordField } from './password-field';

@Component({
  selector: 'sr-reset-password-page',
  imports: [FrontPage, MatButton, PasswordField, ReactiveFormsModule, RouterLink],
  template: `<sr-front-page heading="New password" intro="Every other session of yours ends with it.">
    <form class="sr-form" [formGroup]="form" (ngSubmit)="submit()" novalidate>
      <sr-password-field
        label="New password"
        autocomplete="new-password"
        hint="At least 8 characters; 15 or more are advised."
        [control]="form.controls.password"
      />
      @if (fault()) {
        <p class="fault" role="alert">{{ fault() }}</p>
      }
      <div class="sr-actions">
        <button mat-flat-button type="submit" [disabled]="busy()">Set the password</button>
        <a routerLink="/forgot-password">Ask for another link</a>
      </div>
    </form>
  </sr-front-page>`,
  styles: `
    .fault {
      color: var(--mat-sys-error);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ResetPasswordPage {
  /** From the link in the e-mail. */
  readonly token = input.required<string>();

  private readonly api = inject(Api);
  private readonly router = inject(Router);
  protected readonly form = inject(NonNullableFormBuilder).group({
    password: ['', [Validators.required, Validators.minLength(8)]],
  });
  protected readonly busy = signal(false);
  protected readonly fault = signal<string | null>(null);

  protected async submit(): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.busy()) return;
    this.busy.set(true);
    this.fault.set(null);
    try {
      await this.api.call<typeof sessionRoutes.resetPassword>('POST', '/api/password/reset', {
        body: { token: this.token(), password: this.form.getRawValue().password },
        anonymous: true,
      });
      await this.router.navigate(['/sign-in'], { queryParams: { after: 'password-changed' } });
    } catch (error) {
      this.fault.set(showFieldErrors(error, this.form));
    } finally {
      this.busy.set(false);
    }
  }
}
