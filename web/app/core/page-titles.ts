import { inject, Injectable } from '@angular/core';
import { Title } from '@angular/platform-browser';
import { type RouterStateSnapshot, TitleStrategy } from '@angular/router';

/** Page titles read "Racks · Stillroom"; a page that knows better calls `name`. */
@Injectable({ providedIn: 'root' })
export class PageTitles extends TitleStrategy {
  private readonly title = inject(Title);

  override updateTitle(snapshot: RouterStateSnapshot): void {
    this.name(this.buildTitle(snapshot) ?? '');
  }

  /** Names the page shown, e.g. after its room. */
  name(page: string): void {
    this.title.setTitle(page ? `${page} · Stillroom` : 'Stillroom');
  }
}
