import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { RouterLink } from '@angular/router';
import type { BlockView } from './wall-layout';

/**
 * A batch drawn as the wax itself: honey when just poured, ivory when hard. The copper line at its side rises as
 * scent settles; the line at its foot fills towards the ship gate, a notch on it marks the next gate.
 */
@Component({
  selector: 'sr-wax-block',
  imports: [RouterLink],
  template: `<a
    [routerLink]="['/batches', block().id]"
    [attr.aria-label]="block().label"
    [attr.tabindex]="tabbable() ? 0 : -1"
    [class.ready]="block().ready"
    [class.risk]="block().risk"
    [style.--h]="percent(block().hardening)"
  >
    <b>{{ block().code }}</b>
    <span class="next">
      @if (block().what) {
        <span class="what">{{ block().what }}&ngsp;</span>
      }
      @if (day().weekday) {
        <span class="weekday">{{ day().weekday }}&ngsp;</span>
      }
      {{ day().rest }}
    </span>
    <i class="scent" [style.transform]="'scaleY(' + block().scent + ')'"></i>
    <i class="passed" [style.transform]="'scaleX(' + block().passed + ')'"></i>
    @if (block().gateAt; as at) {
      <i class="notch" [style.inset-inline-start]="percent(at)"></i>
    }
  </a>`,
  styles: `
    :host {
      display: block;
      min-inline-size: 0;
      container-type: inline-size;
    }
    a {
      position: relative;
      display: block;
      block-size: 46px;
      padding: 3px 4px 0 10px;
      overflow: hidden;
      border: 1px solid var(--sr-wax-edge);
      border-block-end: 0;
      background: color-mix(in oklab, var(--sr-ivory) var(--h), var(--sr-honey));
      color: var(--sr-wax-ink);
      font-size: 13px;
      line-height: 1.2;
      text-decoration: none;
      white-space: nowrap;
      transition: background-color 200ms;
    }
    a:hover {
      border-color: var(--sr-wax-ink);
    }
    a:focus-visible {
      outline: 3px solid var(--sr-copper);
      outline-offset: 1px;
      z-index: 1;
    }
    b {
      display: block;
      font-weight: 700;
    }
    .ready {
      border-block-start: 3px solid var(--sr-good);
      padding-block-start: 1px;
    }
    .ready .next {
      color: var(--sr-wax-good);
      font-weight: 700;
    }
    i {
      position: absolute;
      transition: transform 200ms;
    }
    .scent {
      inset: 2px auto 3px 2px;
      inline-size: 4px;
      background: var(--sr-scent);
      transform-origin: bottom;
    }
    .passed {
      inset: auto 0 0;
      block-size: 2px;
      background: var(--sr-wax-ink);
      opacity: 0.55;
      transform-origin: left;
    }
    .notch {
      inset-block-end: 0;
      margin-inline-start: -8px;
      border-inline: 4.5px solid transparent;
      border-block-end: 7px solid var(--sr-wax-ink);
    }
    .risk::after {
      content: '';
      position: absolute;
      inset: 0 0 auto auto;
      border: 7px solid;
      border-color: var(--sr-risk) var(--sr-risk) transparent transparent;
    }
    @container (max-width: 92px) {
      .what {
        display: none;
      }
    }
    @container (max-width: 62px) {
      .risk::after {
        border-width: 5px;
      }
      .weekday {
        display: none;
      }
      a {
        padding-inline-start: 8px;
        font-size: 12px;
      }
    }
    @media (forced-colors: active) {
      a {
        border: 1px solid LinkText;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class WaxBlock {
  readonly block = input.required<BlockView>();
  readonly tabbable = input(true);

  /** The weekday apart, so that a narrow block can leave it out. */
  protected readonly day = computed(() => {
    const [, weekday = '', rest = ''] = /^([A-Z][a-z]{2} )?(.*)$/.exec(this.block().when) ?? [];
    return { weekday: weekday.trim(), rest };
  });

  protected percent(part: number): string {
    return `${(part * 100).toFixed(1)}%`;
  }
}
