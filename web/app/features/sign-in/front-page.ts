import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** Frame of the pages before the sign-in: the name, a shelf of hardening wax, one question. */
@Component({
  selector: 'sr-front-page',
  template: `<main>
    <p class="brand">Stillroom</p>
    <div class="shelf" aria-hidden="true">
      <i class="poured"></i><i class="half"></i><i class="nearly"></i><i class="hard"></i>
    </div>
    <h1>{{ heading() }}</h1>
    @if (intro()) {
      <p class="sr-muted">{{ intro() }}</p>
    }
    <ng-content />
  </main>`,
  styles: `
    :host {
      display: grid;
      min-block-size: 100dvh;
      padding: 24px 20px 40px;
      align-items: start;
      justify-items: center;
    }
    main {
      display: grid;
      gap: 14px;
      inline-size: min(400px, 100%);
      margin-block-start: min(12vh, 110px);
    }
    .brand {
      font-size: 19px;
      font-weight: 700;
      letter-spacing: 0.02em;
    }
    .shelf {
      display: flex;
      gap: 4px;
      align-items: flex-end;
      block-size: 58px;
      margin-block-end: 14px;
      padding-inline: 4px;
      border-block-end: 3px solid var(--sr-rack);
    }
    .shelf i {
      position: relative;
      flex: 1;
      block-size: 46px;
      border: 1px solid var(--sr-wax-edge);
      border-block-end: 0;
      background: color-mix(in oklab, var(--sr-ivory) var(--h), var(--sr-honey));
    }
    .shelf i::after {
      content: '';
      position: absolute;
      inset: auto auto 0 3px;
      inline-size: 4px;
      block-size: var(--h);
      background: var(--sr-scent);
    }
    .poured {
      --h: 6%;
    }
    .half {
      --h: 45%;
    }
    .nearly {
      --h: 80%;
    }
    .hard {
      --h: 100%;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class FrontPage {
  readonly heading = input.required<string>();
  readonly intro = input('');
}
