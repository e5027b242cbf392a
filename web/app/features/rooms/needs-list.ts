import { ChangeDetectionStrategy, Component, computed, input, signal } from '@angular/core';
import { RouterLink } from '@angular/router';
import { StatusMark } from '../../ui/status-mark';
import type { NeedLine } from './needs-now';

const SHOWN = 6;

/** The short list of what needs somebody now; each line leads to it and says whose it is. */
@Component({
  selector: 'sr-needs-list',
  imports: [RouterLink, StatusMark],
  template: `<h2 class="sr-only">What needs somebody now</h2>
    <ul>
      @for (line of shown(); track line.id) {
        <li>
          <sr-status-mark [status]="line.status" />
          <a [routerLink]="line.link"
            ><b>{{ line.lead }}</b
            >&ngsp;<span class="sr-muted">{{ line.rest }}</span></a
          >
          <span class="who">{{ line.who }}</span>
        </li>
      } @empty {
        <li class="calm">
          <sr-status-mark status="good" />
          <span
            ><b>Nothing needs anybody now.</b>&ngsp;<span class="sr-muted"
              >No alert, no rack ready today, no test due.</span
            ></span
          >
        </li>
      }
    </ul>
    @if (more() > 0) {
      <button class="sr-text-button" type="button" (click)="all.set(!all())" [attr.aria-expanded]="all()">
        {{ all() ? 'Show fewer' : 'Show ' + more() + ' more' }}
      </button>
    }`,
  styles: `
    ul {
      list-style: none;
      padding: 0;
    }
    li {
      display: grid;
      grid-template-columns: 18px 1fr auto;
      gap: 8px;
      padding: 8px 0;
      border-block-end: 1px solid var(--mat-sys-outline-variant);
    }
    sr-status-mark {
      margin-block-start: 3px;
    }
    a {
      color: inherit;
      text-decoration: none;
    }
    a:hover b {
      text-decoration: underline;
    }
    b {
      font-weight: 600;
    }
    .who {
      text-align: end;
    }
    @media (max-width: 700px) {
      li {
        grid-template-columns: 18px 1fr;
      }
      .who {
        grid-column: 2;
        text-align: start;
        color: var(--mat-sys-on-surface-variant);
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class NeedsList {
  readonly lines = input.required<readonly NeedLine[]>();

  protected readonly all = signal(false);
  protected readonly shown = computed(() => (this.all() ? this.lines() : this.lines().slice(0, SHOWN)));
  protected readonly more = computed(() => Math.max(0, this.lines().length - SHOWN));
}
