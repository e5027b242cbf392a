import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import type { Design, Fragrance, materialRoutes, Wax } from '#shared/contract/materials';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Session } from '../../core/session/session';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { Designs } from './designs';
import { Fragrances } from './fragrances';
import { Waxes } from './waxes';

interface Materials {
  readonly waxes: Wax[];
  readonly fragrances: Fragrance[];
  readonly designs: Design[];
}

/** Waxes with their cure numbers, fragrance oils, and the designs poured from them. */
@Component({
  selector: 'sr-materials-page',
  imports: [Designs, ErrorNote, Fragrances, LoadingNote, PageHeader, Waxes],
  template: `<sr-page-header heading="Materials" note="shared by all studios" />
    @if (all.fault(); as sentence) {
      <sr-error-note [text]="sentence" (retry)="load()" />
    } @else if (all.value(); as known) {
      <div class="sheets">
        <sr-designs
          [designs]="known.designs"
          [waxes]="known.waxes"
          [fragrances]="known.fragrances"
          [mayWrite]="mayWrite()"
          (changed)="load()"
        />
        <sr-waxes [waxes]="known.waxes" [mayWrite]="mayWrite()" (changed)="load()" />
        <sr-fragrances [fragrances]="known.fragrances" [mayWrite]="mayWrite()" (changed)="load()" />
      </div>
    } @else {
      <sr-loading-note />
    }`,
  styles: `
    .sheets {
      display: grid;
      gap: 18px;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MaterialsPage {
  private readonly api = inject(Api);
  private readonly session = inject(Session);
  protected readonly all = new Loadable<Materials>();
  protected readonly mayWrite = computed(() => this.session.mayAnywhere('materials.write'));

  constructor() {
    void this.load();
  }

  protected load(): Promise<void> {
    return this.all.load(async () => {
      const [waxes, fragrances, designs] = await Promise.all([
        this.api.call<typeof materialRoutes.waxes>('GET', '/api/waxes'),
        this.api.call<typeof materialRoutes.fragrances>('GET', '/api/fragrances'),
        this.api.call<typeof materialRoutes.designs>('GET', '/api/designs'),
      ]);
      return { waxes, fragrances, designs };
    });
  }
}
