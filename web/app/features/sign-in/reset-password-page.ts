import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'sr-reset-password-page',
  template: '<h1>New password</h1>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ResetPasswordPage {}
