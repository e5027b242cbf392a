import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { FAMILY_WORDS } from '../../ui/family-words';
import { LiveStore } from '../../core/live/live-store';
import { PageTitles } from '../../core/page-titles';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { figure } from '../../core/units/measure-words';
import { ChartShell, type ChartView } from '../../ui/chart-shell';
import { DataTable } from '../../ui/data-table';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { BatchActions } from './batch-actions';
import { BatchStore } from './batch-store';
import { gapWords, gateWords, hoursInWords, recheckWords, shiftWords } from './batch-words';
import { CurveChart } from './curve-chart';

const STATUS_WORDS = { curing: 'curing', dispatched: 'dispatched', scrapped: 'scrapped' } as const;
const FROSTING_WORDS = { low: 'low', watch: 'to be watched', high: 'high' } as const;
const GAPS_SHOWN = 12;

/** One batch: when it is ready and why, where it stood, what was decided. */
@Component({
  selector: 'sr-batch-page',
  imports: [
    BatchActions,
    ChartShell,
    CurveChart,
    DataTable,
    ErrorNote,
    LoadingNote,
    MatButton,
    PageHeader,
    RouterLink,
  ],
  providers: [BatchStore],
  templateUrl: './batch-page.html',
  styleUrl: './batch-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class BatchPage {
  /** From the address. */
  readonly batchId = input.required<string>();
  /** Studio of the batch, from the query. */
  readonly studio = input<string>();

  protected readonly store = inject(BatchStore);
  protected readonly live = inject(LiveStore);
  private readonly session = inject(Session);
  private readonly clock = inject(StudioClock);
  private readonly formatsOf = inject(Formats);
  private readonly titles = inject(PageTitles);
  protected readonly view = signal<ChartView>('chart');
  protected readonly page = this.store.page.value;
  protected readonly formats = computed(() => {
    const studio = this.store.studio();
    return studio ? this.formatsOf.of(studio.studio()) : null;
  });
  protected readonly mayPour = computed(() =>
    this.session.may('batches.pour', this.store.studio()?.id ?? ''),
  );
  protected readonly note = computed(() => {
    const [page, formats] = [this.page(), this.formats()];
    if (!page || !formats) return '';
    const { card } = page;
    const design = card.designName === null ? '' : `${card.designName}, `;
    return `${design}${card.vessels} vessels, poured ${formats.dayAndTime(card.pouredAt)}`;
  });
  protected readonly facts = computed(() => {
    const [page, formats] = [this.page(), this.formats()];
    if (!page || !formats) return null;
    const { card, recipe, estimate } = page;
    const now = this.clock.cell();
    return {
      status: STATUS_WORDS[card.status],
      wax: card.waxFamily === null ? '' : FAMILY_WORDS[card.waxFamily],
      wickTest: gateWords(card.wickTest, formats, now),
      ship: gateWords(card.ship, formats, now),
      recheck: estimate ? recheckWords(estimate.recheck, formats) : '',
      recipe: recipe && {
        ...recipe,
        load: `${figure(recipe.loadPercentOfWax, 1)} % of wax, ${figure(recipe.loadPercentOfMix, 1)} % of mix`,
        wax: `${figure(recipe.waxGrams, 0)} g`,
        fragrance: `${figure(recipe.fragranceGrams, 0)} g`,
        pour: recipe.pourCelsius === null ? 'not noted' : formats.temperature(recipe.pourCelsius, 0),
      },
      stays: page.stays.map((stay) => ({
        id: stay.id,
        where: `${stay.roomName}, ${stay.rackName}, shelf ${stay.shelfPosition}`,
        roomId: stay.roomId,
        from: formats.dayAndTime(stay.from),
        to: stay.to === null ? 'still there' : formats.dayAndTime(stay.to),
      })),
      verdicts: page.verdicts.map((verdict) => ({
        id: verdict.id,
        when: formats.dayAndTime(verdict.at),
        passed: verdict.passed ? 'passed' : 'failed',
        by: verdict.signedBy,
        note: verdict.note,
        age: `${figure(verdict.cureAgeDays, 1)} d, ${figure(verdict.hardeningAtTest * 100, 1)} % hard`,
      })),
    };
  });
  /** The numbers behind the date; a viewer gets none. */
  protected readonly numbers = computed(() => {
    const [estimate, formats] = [this.page()?.estimate, this.formats()];
    if (!estimate?.numbers || !formats) return null;
    const { numbers } = estimate;
    const per = (share: number) => `${figure(share * 100, 1)} %`;
    return {
      asOf: formats.dayAndTime(estimate.asOf),
      rows: [
        ['Cure age (equivalent days at 21 °C)', `${figure(estimate.cureAgeHardeningDays, 2)} d`],
        ['Scent age (equivalent days at 21 °C)', `${figure(estimate.cureAgeScentDays, 2)} d`],
        ['Hardened', per(estimate.hardening)],
        ['Scent settled', per(estimate.scent)],
        ['Set', `${formats.dayAndTime(estimate.set.at)}${estimate.set.reached ? '' : ', not yet'}`],
        [
          'Needed for the wick test',
          `${figure(numbers.testDays, 1)} d, scent ${figure(numbers.scentDays, 1)} d`,
        ],
        ['Needed for shipping', `${figure(numbers.shipDays, 1)} d`],
        [
          'Mean temperature so far',
          numbers.meanCelsius === null ? '–' : formats.temperature(numbers.meanCelsius, 2),
        ],
        ['Doubt about the wax’s days', `${figure(numbers.cvD * 100, 0)} %`],
        ['Doubt about its energy', `${figure(numbers.sdEnergy, 0)} kJ/mol`],
        ['Doubt about the room', formats.difference(numbers.sdRoom)],
        ['Doubt from gaps', `${figure(numbers.sdGapsDays * 24, 1)} h`],
        ['Doubt in all (ln of age over days)', figure(numbers.spread, 3)],
      ],
      provenance: numbers.provenance,
      calibrated: numbers.calibrated,
    };
  });
  /** What the rooms have done to it: also for those who see no numbers. */
  protected readonly behind = computed(() => {
    const [estimate, formats] = [this.page()?.estimate, this.formats()];
    if (!estimate || !formats) return null;
    return {
      outside: estimate.hoursOutsideTestedRange > 0 ? `${figure(estimate.hoursOutsideTestedRange, 1)} h` : '',
      resoftened: estimate.resoftened.map(
        ({ from, to }) => `${formats.dayAndTime(from)} to ${formats.dayAndTime(to)}`,
      ),
      frosting: estimate.frosting && {
        index: figure(estimate.frosting.index, 0),
        level: FROSTING_WORDS[estimate.frosting.level],
        parts: `${figure(estimate.frosting.degreeHours, 1)} °C·h above its limit, ${figure(estimate.frosting.cycleDamage, 2)} from swings`,
      },
      gaps: estimate.gaps.slice(0, GAPS_SHOWN).map((gap) => gapWords(gap, formats)),
      moreGaps: Math.max(0, estimate.gaps.length - GAPS_SHOWN),
    };
  });
  protected readonly shifts = computed(() => {
    const formats = this.formats();
    return formats ? (this.page()?.shifts ?? []).map((shift) => shiftWords(shift, formats)) : [];
  });
  /** What the entries add up to. */
  protected readonly shiftSum = computed(() => {
    const shifts = this.page()?.shifts ?? [];
    const hours = shifts.reduce((sum, shift) => sum + shift.hours, 0);
    return `Altogether ${hoursInWords(hours)}, against a steady ${this.formats()?.temperature(21, 0) ?? ''} since the pour.`;
  });
  protected readonly curveRows = computed(() => {
    const formats = this.formats();
    const points = this.store.curve.value() ?? [];
    const step = Math.max(1, Math.ceil(points.length / 40));
    return formats
      ? points
          .filter((_, index) => index % step === 0)
          .map((point) => ({
            at: formats.dayAndTime(point.at),
            forecast: point.forecast ? 'forecast' : '',
            age: figure(point.cureAgeDays, 2),
            range: `${figure(point.lowDays, 2)} to ${figure(point.highDays, 2)}`,
            hardening: figure(point.hardening * 100, 1),
            scent: figure(point.scent * 100, 1),
          }))
      : [];
  });
  protected readonly curveSummary = computed(() => {
    const estimate = this.page()?.estimate;
    if (!estimate) return '';
    return `${figure(estimate.cureAgeHardeningDays, 1)} days of cure at 21 °C, ${Math.round(estimate.hardening * 100)} % hardened, scent ${Math.round(estimate.scent * 100)} % settled. Dashes: forecast.`;
  });
  /** Says when a live frame brought something newer than the page. */
  private readonly liveVersion = computed(() => {
    const card = this.store
      .studio()
      ?.batches()
      .find(({ id }) => id === this.batchId());
    return card ? `${card.version} ${card.shelfId} ${card.ship.t50}` : '';
  });

  constructor() {
    effect(() => {
      const id = this.batchId();
      if (!this.live.loaded()) return;
      untracked(() => void this.load(id));
    });
    effect(() => {
      const version = this.liveVersion();
      const id = untracked(() => this.batchId());
      if (version !== '' && untracked(() => this.page()) !== null) untracked(() => void this.load(id));
    });
    effect(() => {
      const code = this.page()?.card.code;
      if (code) this.titles.name(code);
    });
  }

  protected load(batchId: string): Promise<void> {
    return this.store.load(batchId, this.studio());
  }
}
