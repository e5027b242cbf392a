import { ChangeDetectionStrategy, Component, computed, effect, inject, input, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatError, MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { Router, RouterLink } from '@angular/router';
import type { ReplyOf } from '#shared/contract/route';
import type { sessionRoutes } from '#shared/contract/session';
import { Api } from '../../core/api/api';
import { sentenceOf, showFieldErrors } from '../../core/api/api-error';
import { Session } from '../../core/session/session';
import { controlError } from '../../ui/control-error';
import { LoadingNote } from '../../ui/loading-note';
import { FrontPage } from './front-page';
import { PasswordField } from './password-field';

type Invitation = ReplyOf<typeof sessionRoutes.invitation>;

@Component({
  selector: 'sr-invitation-page',
  imports: [
    FrontPage,
    LoadingNote,
    MatButton,
    MatError,
    MatFormField,
    MatInput,
    MatLabel,
    PasswordField,
    ReactiveFormsModule,
    RouterLink,
  ],
  template: `<sr-front-page heading="Invitation" [intro]="intro()">
    @if (invitation(); as invitation) {
      <form class="sr-form" [formGroup]="form" (ngSubmit)="submit(invitation)" novalidate>
        <p>
          You sign in as <b>{{ invitation.email }}</b>.
        </p>
        <input type="hidden" autocomplete="username" [value]="invitation.email" />
        <mat-form-field subscriptSizing="dynamic">
          <mat-label>Your name</mat-label>
          <input matInput formControlName="name" autocomplete="name" required maxlength="80" />
          <mat-error>{{ error() }}</mat-error>
        </mat-form-field>
        <sr-password-field
          autocomplete="new-password"
          hint="At least 8 characters; 15 or more are advised."
          [control]="form.controls.password"
        />
        @if (fault()) {
          <p class="fault" role="alert">{{ fault() }}</p>
        }
        <div class="sr-actions">
          <button mat-flat-button type="submit" [disabled]="busy()">Accept</button>
        </div>
      </form>
    } @else if (fault()) {
      <p role="alert">{{ fault() }}</p>
      <p><a routerLink="/sign-in">To the sign-in</a></p>
    } @else {
      <sr-loading-note />
    }
  </sr-front-page>`,
  styles: `
    .fault {
      color: var(--mat-sys-error);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class InvitationPage {
  /** From the link in the e-mail. */
  readonly token = input.required<string>();

  private readonly api = inject(Api);
  private readonly session = inject(Session);
  private readonly router = inject(Router);
  protected readonly form = inject(NonNullableFormBuilder).group({
    name: ['', [Validators.required, Validators.maxLength(80)]],
    password: ['', [Validators.required, Validators.minLength(8)]],
  });
  protected readonly busy = signal(false);
  protected readonly fault = signal<string | null>(null);
  protected readonly invitation = signal<Invitation | null>(null);

  /** "Orla Finch invites you to Larkrise Candleworks: maker in Quay Street." */
  protected readonly intro = computed(() => {
    const invitation = this.invitation();
    if (!invitation) return '';
    const roles = invitation.owner
      ? 'owner of every studio'
      : invitation.studios.map(({ name, role }) => `${role} in ${name}`).join(', ');
    return `${invitation.invitedBy} invites you to ${invitation.company}: ${roles}.`;
  });

  constructor() {
    effect(() => void this.load(this.token()));
  }

  protected error(): string {
    return controlError(this.form.controls.name);
  }

  protected async submit({ email }: Invitation): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.busy()) return;
    this.busy.set(true);
    this.fault.set(null);
    const { name, password } = this.form.getRawValue();
    try {
      await this.api.call<typeof sessionRoutes.acceptInvitation>('POST', '/api/invitations/:token/accept', {
        params: { token: this.token() },
        body: { name, password },
        anonymous: true,
      });
      await this.session.signIn(email, password);
      await this.router.navigateByUrl('/');
    } catch (error) {
      this.fault.set(showFieldErrors(error, this.form));
    } finally {
      this.busy.set(false);
    }
  }

  private async load(token: string): Promise<void> {
    try {
      this.invitation.set(
        await this.api.call<typeof sessionRoutes.invitation>('GET', '/api/invitations/:token', {
          params: { token },
          anonymous: true,
        }),
      );
    } catch (error) {
      this.fault.set(sentenceOf(error));
    }
  }
}
