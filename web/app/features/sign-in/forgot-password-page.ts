import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'sr-forgot-password-page',
  template: '<h1>Forgotten password</h1>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ForgotPasswordPage {}
