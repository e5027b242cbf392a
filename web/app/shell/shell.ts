import { ChangeDetectionStrategy, Component } from '@angular/core';
import { RouterOutlet } from '@angular/router';

@Component({
  selector: 'sr-shell',
  imports: [RouterOutlet],
  template: '<main id="main"><router-outlet /></main>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Shell {}
