import {
  ChangeDetectionStrategy,
  Component,
  computed,
  DestroyRef,
  effect,
  type ElementRef,
  inject,
  untracked,
  viewChild,
} from '@angular/core';
import { toSignal } from '@angular/core/rxjs-interop';
import { NavigationEnd, Router, RouterLink, RouterOutlet } from '@angular/router';
import { filter, map, pairwise } from 'rxjs';
import { LiveStore } from '../core/live/live-store';
import { Session } from '../core/session/session';
import { Icon } from '../ui/icon';
import { AccountMenu } from './account-menu';
import { ConnectionBanner } from './connection-banner';
import { MoreMenu } from './more-menu';
import { isCurrent, NAVIGATION } from './navigation';
import { NoticesBell } from './notices-bell';

const ON_THE_BAR = 4;

/** What stands around every page of a signed-in person: navigation, connection, notices, account. */
@Component({
  selector: 'sr-shell',
  imports: [AccountMenu, ConnectionBanner, Icon, MoreMenu, NoticesBell, RouterLink, RouterOutlet],
  templateUrl: './shell.html',
  styleUrl: './shell.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Shell {
  private readonly session = inject(Session);
  private readonly router = inject(Router);
  private readonly live = inject(LiveStore);
  private readonly main = viewChild.required<ElementRef<HTMLElement>>('main');

  private readonly ends = this.router.events.pipe(filter((event) => event instanceof NavigationEnd));
  private readonly url = toSignal(this.ends.pipe(map((end) => end.urlAfterRedirects)), {
    initialValue: this.router.url,
  });

  protected readonly items = computed(() => {
    this.session.me();
    const url = this.url();
    return NAVIGATION.filter(
      (item) => item.permission === null || this.session.mayAnywhere(item.permission),
    ).map((item) => ({ ...item, current: isCurrent(item.path, url) }));
  });
  protected readonly onTheBar = computed(() => this.items().slice(0, ON_THE_BAR));
  protected readonly underMore = computed(() => this.items().slice(ON_THE_BAR));
  /** Open alerts that nobody has acknowledged yet. */
  protected readonly waiting = computed(
    () =>
      this.live
        .studios()
        .flatMap((studio) => studio.alerts())
        .filter((alert) => alert.acknowledged === null && alert.shelved === null).length,
  );

  constructor() {
    void this.live.start();
    inject(DestroyRef).onDestroy(() => this.live.stop());
    effect(() => {
      if (!this.session.signedIn()) untracked(() => this.leave());
    });
    const pages = this.ends.pipe(
      map((end) => end.urlAfterRedirects.split(/[?#]/)[0]),
      pairwise(),
    );
    const moves = pages.subscribe(([before, after]) => {
      if (before !== after) setTimeout(() => this.focusPage());
    });
    inject(DestroyRef).onDestroy(() => moves.unsubscribe());
  }

  /** Puts the reader at the top of the page: on its heading, or where it begins. */
  protected focusPage(event?: Event): void {
    event?.preventDefault();
    const main = this.main().nativeElement;
    (main.querySelector<HTMLElement>('h1[tabindex]') ?? main).focus();
  }

  private leave(): void {
    const url = this.router.url;
    const ended = this.session.lastEnd() !== 'signed-out' && url !== '/';
    void this.router.navigate(['/sign-in'], { queryParams: ended ? { next: url } : {} });
  }
}
