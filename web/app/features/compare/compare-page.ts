import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  signal,
  untracked,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import type { compareRoutes, StudioComparison } from '#shared/contract/compare';
import type { ReplyOf } from '#shared/contract/route';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { LiveStore } from '../../core/live/live-store';
import { StudioClock } from '../../core/time/studio-clock';
import { DAY_MS } from '../../core/time/zoned-time';
import { figure } from '../../core/units/measure-words';
import { type TemperatureUnit, Units } from '../../core/units/units';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { FAMILY_WORDS } from '../../ui/family-words';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { comparisonCsv, MEASURES, pairSentence, tooFewSentence } from './compare-words';
import { type Dot, DotPlot } from './dot-plot';

type Comparison = ReplyOf<typeof compareRoutes.compare>;

/** Studios side by side over a period. */
@Component({
  selector: 'sr-compare-page',
  imports: [
    DataTable,
    DotPlot,
    EmptyNote,
    ErrorNote,
    LoadingNote,
    MatButton,
    MatButtonToggle,
    MatButtonToggleGroup,
    PageHeader,
  ],
  templateUrl: './compare-page.html',
  styles: `
    :host {
      display: grid;
      grid-template-columns: minmax(0, 1fr);
      gap: 16px;
      max-inline-size: 1100px;
    }
    .filters {
      display: flex;
      flex-wrap: wrap;
      gap: 10px;
    }
    h2 {
      margin-block-end: 6px;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ComparePage {
  private readonly api = inject(Api);
  private readonly units = inject(Units);
  private readonly clock = inject(StudioClock);
  private readonly live = inject(LiveStore);
  protected readonly days = signal(30);
  protected readonly view = signal<'chart' | 'table'>('chart');
  protected readonly comparison = new Loadable<Comparison>();
  protected readonly measures = MEASURES;

  /** A person's own choice; else the unit of the first studio, so that all are told alike. */
  private readonly unit = computed<TemperatureUnit>(() =>
    this.units.unitFor(this.live.studios()[0]?.studio().unit ?? 'C'),
  );
  protected readonly plots = computed(() => {
    const studios = this.comparison.value()?.studios ?? [];
    return MEASURES.map((measure) => ({
      name: measure.name,
      about: measure.about,
      dots: studios.map((studio): Dot => {
        const value = measure.read(studio);
        return {
          ...{ label: studio.studioName, value, low: null, high: null },
          words: value === null ? 'nothing to tell' : measure.write(value, this.unit()),
        };
      }),
    }));
  });
  /** Days over nominal, family by family. */
  protected readonly families = computed(() => {
    const studios = this.comparison.value()?.studios ?? [];
    const families = new Set(
      studios.flatMap(({ daysOverNominal }) => daysOverNominal.map(({ waxFamily }) => waxFamily)),
    );
    return [...families].map((family) => ({
      name: FAMILY_WORDS[family],
      dots: studios.flatMap((studio): Dot[] => {
        const found = studio.daysOverNominal.find(({ waxFamily }) => waxFamily === family);
        if (!found || found.n === 0) return [];
        const { mean, low, high, n } = found;
        return [
          {
            ...{ label: studio.studioName, value: mean, low, high },
            words:
              mean === null ? `${n} batches` : `${signed(mean)} d, ${n} ${n === 1 ? 'batch' : 'batches'}`,
          },
        ];
      }),
    }));
  });
  protected readonly sentences = computed(() => {
    const known = this.comparison.value();
    if (!known) return [];
    const nameOf = (id: string) => known.studios.find(({ studioId }) => studioId === id)?.studioName ?? '';
    const enough = known.pairs.filter(({ verdict }) => verdict !== 'too-few');
    const few = known.pairs.length - enough.length;
    return [
      ...enough.map((pair) => pairSentence(pair, nameOf, FAMILY_WORDS[pair.waxFamily])),
      ...(few === 0 ? [] : [tooFewSentence(few)]),
    ];
  });

  constructor() {
    effect(() => {
      const days = this.days();
      untracked(() => void this.load(days));
    });
  }

  protected load(days: number): Promise<void> {
    const to = this.clock.cell();
    return this.comparison.load(() =>
      this.api.call<typeof compareRoutes.compare>('GET', '/api/compare', {
        query: { from: new Date(to - days * DAY_MS).toISOString(), to: new Date(to).toISOString() },
      }),
    );
  }

  protected cell(studio: StudioComparison, index: number): string {
    const measure = MEASURES[index];
    const value = measure?.read(studio) ?? null;
    return value === null || !measure ? '–' : measure.write(value, this.unit());
  }

  protected download(): void {
    const csv = comparisonCsv(this.comparison.value()?.studios ?? []);
    const link = document.createElement('a');
    link.href = URL.createObjectURL(new Blob([csv], { type: 'text/csv' }));
    link.download = `stillroom-compare-${this.days()}-days.csv`;
    link.click();
    URL.revokeObjectURL(link.href);
  }

  protected print(): void {
    window.print();
  }
}

function signed(days: number): string {
  return `${days > 0 ? '+' : ''}${figure(days, 2)}`;
}
