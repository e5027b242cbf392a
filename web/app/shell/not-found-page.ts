import { ChangeDetectionStrategy, Component } from '@angular/core';
import { RouterLink } from '@angular/router';

@Component({
  selector: 'sr-not-found-page',
  imports: [RouterLink],
  template: `<h1>Nothing here</h1>
    <p>The address leads to no page. <a routerLink="/">Back to the rooms</a></p>`,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class NotFoundPage {}
