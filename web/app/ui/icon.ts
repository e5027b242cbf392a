import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { ICON_PATHS, type IconName } from './icon-paths';

/** An icon beside a word; hidden from screen readers, so the word must be there. */
@Component({
  selector: 'sr-icon',
  template: `<svg viewBox="0 0 960 960" aria-hidden="true" focusable="false">
    <path [attr.d]="path()" />
  </svg>`,
  styles: `
    :host {
      display: inline-flex;
      inline-size: 1.35em;
      block-size: 1.35em;
      flex: none;
      vertical-align: -0.3em;
    }
    svg {
      inline-size: 100%;
      block-size: 100%;
      fill: currentColor;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Icon {
  readonly name = input.required<IconName>();
  protected readonly path = computed(() => ICON_PATHS[this.name()]);
}
