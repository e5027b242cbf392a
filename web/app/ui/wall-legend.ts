import { ChangeDetectionStrategy, Component } from '@angular/core';

/** Explains how a wall is drawn. */
@Component({
  selector: 'sr-wall-legend',
  template: `<dl>
    <div><dt>Wax as it hardens</dt></div>
    <div>
      <dt><i class="block" style="--h: 8%; --s: 0.05; --p: 0.06"></i></dt>
      <dd>just poured</dd>
    </div>
    <div>
      <dt><i class="block" style="--h: 45%; --s: 0.4; --p: 0.45"></i></dt>
      <dd>half way</dd>
    </div>
    <div>
      <dt><i class="block" style="--h: 80%; --s: 0.75; --p: 0.8"></i></dt>
      <dd>nearly</dd>
    </div>
    <div>
      <dt><i class="block ready" style="--h: 100%; --s: 1; --p: 1"></i></dt>
      <dd>ready to ship</dd>
    </div>
    <div>
      <dt><i class="block risk" style="--h: 40%; --s: 0.4; --p: 0.4"></i></dt>
      <dd>corner: above the wax's frosting limit</dd>
    </div>
    <div>
      <dt><i class="line"></i></dt>
      <dd>rises as scent settles</dd>
    </div>
    <div>
      <dt><i class="way"></i></dt>
      <dd>way to the ship gate, notch: next gate</dd>
    </div>
  </dl>`,
  styles: `
    dl {
      display: flex;
      flex-wrap: wrap;
      gap: 10px 20px;
      align-items: center;
      margin-block-start: 24px;
      font-size: 14px;
      color: var(--mat-sys-on-surface-variant);
    }
    div {
      display: flex;
      gap: 8px;
      align-items: center;
    }
    i {
      position: relative;
      display: block;
    }
    .block {
      inline-size: 34px;
      block-size: 28px;
      overflow: hidden;
      border: 1px solid var(--sr-wax-edge);
      background: color-mix(in oklab, var(--sr-ivory) var(--h), var(--sr-honey));
    }
    .block::before {
      content: '';
      position: absolute;
      inset: auto auto 1px 2px;
      inline-size: 4px;
      block-size: calc(var(--s) * 24px);
      background: var(--sr-scent);
    }
    .ready {
      border-block-start: 3px solid var(--sr-good);
    }
    .risk::after {
      content: '';
      position: absolute;
      inset: 0 0 auto auto;
      border: 6px solid;
      border-color: var(--sr-risk) var(--sr-risk) transparent transparent;
    }
    .line {
      inline-size: 4px;
      block-size: 24px;
      background: var(--sr-copper);
    }
    .way {
      inline-size: 40px;
      block-size: 10px;
      border-block-end: 2px solid var(--mat-sys-on-surface-variant);
    }
    .way::after {
      content: '';
      position: absolute;
      inset: auto 6px -1px auto;
      border: 4.5px solid transparent;
      border-block-end: 7px solid var(--mat-sys-on-surface);
      border-block-start: 0;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class WallLegend {}
