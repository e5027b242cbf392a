import { ChangeDetectionStrategy, Component, inject, input, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatError, MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { Router, RouterLink } from '@angular/router';
import { showFieldErrors } from '../../core/api/api-error';
import { Session } from '../../core/session/session';
import { controlError } from '../../ui/control-error';
import { FrontPage } from './front-page';
import { PasswordField } from './password-field';

@Component({
  selector: 'sr-sign-in-page',
  imports: [
    FrontPage,
    MatButton,
    MatError,
    MatFormField,
    MatInput,
    MatLabel,
    PasswordField,
    ReactiveFormsModule,
    RouterLink,
  ],
  template: `<sr-front-page heading="Sign in" intro="Cure rooms live, and when each batch is ready.">
    @if (before()) {
      <p role="status">{{ before() }}</p>
    }
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
      <sr-password-field [control]="form.controls.password" />
      @if (fault()) {
        <p class="fault" role="alert">{{ fault() }}</p>
      }
      <div class="sr-actions">
        <button mat-flat-button type="submit" [disabled]="busy()">
          {{ busy() ? 'Signing in…' : 'Sign in' }}
        </button>
        <a routerLink="/forgot-password">Forgotten password</a>
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
export class SignInPage {
  /** Where to go afterwards, from the address. */
  readonly next = input<string>();
  /** "password-changed" after a reset. */
  readonly after = input<string>();

  private readonly session = inject(Session);
  private readonly router = inject(Router);
  protected readonly form = inject(NonNullableFormBuilder).group({
    email: ['', [Validators.required, Validators.email]],
    password: ['', Validators.required],
  });
  protected readonly busy = signal(false);
  protected readonly fault = signal<string | null>(null);

  constructor() {
    if (this.session.signedIn()) void this.router.navigateByUrl('/');
  }

  protected before(): string {
    if (this.after() === 'password-changed') return 'The new password is set. Sign in with it.';
    switch (this.session.lastEnd()) {
      case 'ended':
        return 'Your session has ended. Sign in again to go on where you were.';
      case 'role-changed':
        return 'Your role has changed. Sign in again.';
      default:
        return '';
    }
  }

  protected error(): string {
    return controlError(this.form.controls.email);
  }

  protected async submit(): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.busy()) return;
    this.busy.set(true);
    this.fault.set(null);
    const { email, password } = this.form.getRawValue();
    try {
      await this.session.signIn(email, password);
      await this.router.navigateByUrl(ownAddress(this.next()));
    } catch (error) {
      this.fault.set(showFieldErrors(error, this.form));
    } finally {
      this.busy.set(false);
    }
  }
}

/** An address inside this app; anything else leads to the rooms. */
export function ownAddress(next: string | undefined): string {
  return next !== undefined && /^\/(?![/\\])/.test(next) ? next : '/';
}
