import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'sr-rooms-page',
  template: '<h1>Rooms</h1>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomsPage {}
