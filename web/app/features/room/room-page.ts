import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'sr-room-page',
  template: '<h1>Room</h1>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomPage {}
