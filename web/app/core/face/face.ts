import { DOCUMENT, inject, Injectable, signal } from '@angular/core';

export type FaceChoice = 'system' | 'day' | 'night';

const KEY = 'stillroom.face';

/** The two faces of the product: bone paper by day, bottle green by night; follows the system unless set. */
@Injectable({ providedIn: 'root' })
export class Face {
  private readonly root = inject(DOCUMENT).documentElement;
  private readonly writableChoice = signal<FaceChoice>(remembered());

  readonly choice = this.writableChoice.asReadonly();

  constructor() {
    this.apply(this.writableChoice());
  }

  /** Sets the face on this device. */
  choose(choice: FaceChoice): void {
    this.writableChoice.set(choice);
    localStorage.setItem(KEY, choice);
    this.apply(choice);
  }

  private apply(choice: FaceChoice): void {
    if (choice === 'system') this.root.removeAttribute('data-face');
    else this.root.setAttribute('data-face', choice);
  }
}

function remembered(): FaceChoice {
  const kept = localStorage.getItem(KEY);
  return kept === 'day' || kept === 'night' ? kept : 'system';
}
