import { DOCUMENT, inject, Injectable } from '@angular/core';

/** Says things to screen readers that the eye sees change by itself. */
@Injectable({ providedIn: 'root' })
export class Announcer {
  private readonly document = inject(DOCUMENT);
  private readonly polite = this.region('polite');
  private readonly assertive = this.region('assertive');

  /** Says a sentence when the reader pauses. */
  say(sentence: string): void {
    speak(this.polite, sentence);
  }

  /** Says a sentence at once; for what cannot wait. */
  interrupt(sentence: string): void {
    speak(this.assertive, sentence);
  }

  private region(politeness: 'polite' | 'assertive'): HTMLElement {
    const region = this.document.createElement('div');
    region.className = 'sr-only';
    region.setAttribute('aria-live', politeness);
    region.setAttribute('aria-atomic', 'true');
    this.document.body.append(region);
    return region;
  }
}

function speak(region: HTMLElement, sentence: string): void {
  // The same sentence twice is only heard twice when the text differs.
  region.textContent = region.textContent === sentence ? `${sentence}\u00a0` : sentence;
}
