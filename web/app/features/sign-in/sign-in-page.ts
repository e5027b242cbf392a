import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'sr-sign-in-page',
  template: '<h1>Sign in</h1>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SignInPage {}
