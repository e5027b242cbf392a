import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'sr-invitation-page',
  template: '<h1>Invitation</h1>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class InvitationPage {}
