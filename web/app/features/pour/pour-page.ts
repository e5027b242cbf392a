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
import { toSignal } from '@angular/core/rxjs-interop';
import {
  type AbstractControl,
  FormControl,
  FormGroup,
  ReactiveFormsModule,
  type ValidationErrors,
  Validators,
} from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatError, MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import { Router, RouterLink } from '@angular/router';
import type { batchRoutes } from '#shared/contract/batches';
import type { Design, Fragrance, materialRoutes, Wax } from '#shared/contract/materials';
import { fromFahrenheit, toFahrenheit } from '#shared/units/temperature';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Saving } from '../../core/api/saving';
import { LiveStore } from '../../core/live/live-store';
import { shelfDoubts, shelfGroups } from '../../core/live/shelf-groups';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { instantOfLocal, localInput } from '../../core/time/zoned-time';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { FormField } from '../../ui/form-field';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { ShelfChoice } from '../../ui/shelf-choice';
import { placesNeeded, pourAdvice } from './pour-advice';

const COOLEST_POUR = 20;
const HOTTEST_POUR = 140;
const MOST_VESSELS = 100_000;

interface Materials {
  readonly designs: readonly Design[];
  readonly waxes: readonly Wax[];
  readonly fragrances: readonly Fragrance[];
}

/** Starts a batch and places it. */
@Component({
  selector: 'sr-pour-page',
  imports: [
    EmptyNote,
    ErrorNote,
    FormField,
    LoadingNote,
    MatButton,
    MatCheckbox,
    MatError,
    MatFormField,
    MatLabel,
    MatOption,
    MatSelect,
    PageHeader,
    ReactiveFormsModule,
    RouterLink,
    ShelfChoice,
  ],
  templateUrl: './pour-page.html',
  styleUrl: './pour-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PourPage {
  /** Id of an earlier batch to be poured again, from the query. */
  readonly repeat = input<string>();

  private readonly api = inject(Api);
  private readonly router = inject(Router);
  private readonly announcer = inject(Announcer);
  private readonly session = inject(Session);
  private readonly clock = inject(StudioClock);
  private readonly formatsOf = inject(Formats);
  protected readonly live = inject(LiveStore);
  protected readonly materials = new Loadable<Materials>();
  protected readonly shelfId = signal('');
  protected readonly overfill = signal(false);
  /** What the form was filled from, or why it could not be. */
  protected readonly repeats = signal('');
  protected readonly saving = new Saving();
  protected readonly form = new FormGroup({
    studioId: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    designId: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    code: new FormControl('', { nonNullable: true, validators: [Validators.maxLength(24)] }),
    vessels: new FormControl(24, {
      nonNullable: true,
      validators: [Validators.required, Validators.min(1), Validators.max(MOST_VESSELS), whole],
    }),
    pouredAt: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    pourCelsius: new FormControl<number | null>(null, (control: AbstractControl<number | null>) =>
      this.pourable(control),
    ),
    notes: new FormControl('', { nonNullable: true }),
  });
  private readonly values = toSignal(this.form.valueChanges);
  protected readonly studios = computed(() =>
    this.live.studios().filter(({ id }) => this.session.may('batches.pour', id)),
  );
  protected readonly studio = computed(() => {
    this.values();
    return this.studios().find(({ id }) => id === this.form.getRawValue().studioId) ?? null;
  });
  protected readonly formats = computed(() => {
    const studio = this.studio();
    return studio ? this.formatsOf.of(studio.studio()) : null;
  });
  private readonly design = computed(() => {
    this.values();
    const { designId } = this.form.getRawValue();
    return this.materials.value()?.designs.find(({ id }) => id === designId) ?? null;
  });
  private readonly wax = computed(() => {
    const waxId = this.design()?.waxId;
    return this.materials.value()?.waxes.find(({ id }) => id === waxId) ?? null;
  });
  protected readonly advice = computed(() => {
    this.values();
    const [design, wax, formats] = [this.design(), this.wax(), this.formats()];
    const { vessels, pourCelsius } = this.form.getRawValue();
    if (!design || !wax || !formats || !(vessels >= 1)) return null;
    const oil = this.materials.value()?.fragrances.find(({ id }) => id === design.fragranceId) ?? null;
    const celsius = pourCelsius === null ? null : this.celsius(pourCelsius);
    return pourAdvice(design, wax, oil, vessels, celsius, formats);
  });
  protected readonly shelves = computed(() => {
    this.values();
    const [studio, formats] = [this.studio(), this.formats()];
    if (!studio || !formats) return { groups: [], suggestion: null };
    const kinetics = this.wax()?.kinetics;
    const limit = !kinetics || kinetics.frosting === 'no' ? null : kinetics.frostingFrom;
    return shelfGroups(studio, this.placesNeeded(), limit, formats);
  });
  /** What speaks against the shelf chosen. */
  protected readonly shelfDoubt = computed(() => {
    this.values();
    return shelfDoubts(this.shelves().groups, this.shelfId(), this.placesNeeded());
  });

  constructor() {
    void this.load();
    effect(() => {
      const first = this.studios()[0];
      if (first && untracked(() => this.form.getRawValue().studioId) === '') {
        this.takeStudio(first.id);
      }
    });
    effect(() => {
      const id = this.repeat();
      if (id && this.materials.value() && this.live.loaded()) untracked(() => void this.prefill(id));
    });
  }

  /** Changes the studio; a time nobody has touched stays now, by the clock there. */
  protected takeStudio(studioId: string): void {
    this.shelfId.set('');
    this.form.patchValue({ studioId });
    const { pouredAt } = this.form.controls;
    if (pouredAt.pristine) pouredAt.setValue(this.nowIn(this.studio()?.studio().timeZone ?? 'UTC'));
  }

  protected load(): Promise<void> {
    return this.materials.load(async () => {
      const [designs, waxes, fragrances] = await Promise.all([
        this.api.call<typeof materialRoutes.designs>('GET', '/api/designs'),
        this.api.call<typeof materialRoutes.waxes>('GET', '/api/waxes'),
        this.api.call<typeof materialRoutes.fragrances>('GET', '/api/fragrances'),
      ]);
      return { designs, waxes, fragrances };
    });
  }

  protected async pour(): Promise<void> {
    const studio = this.studio();
    if (studio === null) return;
    const { designId, vessels, pouredAt, pourCelsius, notes } = this.form.getRawValue();
    const code = this.form.getRawValue().code.trim();
    await this.saving.form(this.form, async () => {
      const page = await this.api.call<typeof batchRoutes.pour>('POST', '/api/studios/:studioId/batches', {
        params: { studioId: studio.id },
        body: {
          ...{ designId, vessels, notes },
          ...(code === '' ? {} : { code }),
          pouredAt: new Date(instantOfLocal(pouredAt, studio.studio().timeZone)).toISOString(),
          pourCelsius: pourCelsius === null ? null : this.celsius(pourCelsius),
          shelfId: this.shelfId() === '' ? null : this.shelfId(),
          overfill: this.overfill(),
        },
      });
      this.announcer.say(`${page.card.code} was started.`);
      await this.router.navigate(['/batches', page.card.id], { queryParams: { studio: studio.id } });
    });
  }

  /** Takes design, vessels and temperature from an earlier batch; its notes were about that one. */
  private async prefill(batchId: string): Promise<void> {
    this.repeats.set('');
    for (const { id: studioId } of this.studios()) {
      const page = await this.api
        .call<typeof batchRoutes.get>('GET', '/api/studios/:studioId/batches/:batchId', {
          params: { studioId, batchId },
          query: {},
        })
        .catch(() => null);
      if (!page?.recipe) continue;
      this.takeStudio(studioId);
      const pour = page.recipe.pourCelsius;
      this.form.patchValue({
        ...{ designId: page.recipe.designId, vessels: page.card.vessels },
        pourCelsius: pour === null ? null : this.shown(pour),
      });
      this.repeats.set(`Filled in from ${page.card.code}. Choose a shelf and start.`);
      return;
    }
    this.repeats.set('The earlier batch was not found; fill the form in by hand.');
  }

  /** Room the vessels take on a shelf. */
  private placesNeeded(): number {
    return placesNeeded(this.form.getRawValue().vessels, this.design()?.vesselDiameterMm ?? 75);
  }

  private pourable({ value }: AbstractControl<number | null>): ValidationErrors | null {
    if (value === null) return null;
    const celsius = this.celsius(value);
    if (celsius >= COOLEST_POUR && celsius <= HOTTEST_POUR) return null;
    const formats = this.formats();
    return {
      range: `Between ${formats?.temperature(COOLEST_POUR, 0) ?? ''} and ${formats?.temperature(HOTTEST_POUR, 0) ?? ''}.`,
    };
  }

  private nowIn(timeZone: string): string {
    return localInput(this.clock.minute(), timeZone);
  }

  private celsius(shown: number): number {
    return this.formats()?.unit === 'F' ? fromFahrenheit(shown) : shown;
  }

  private shown(celsius: number): number {
    return Math.round(this.formats()?.unit === 'F' ? toFahrenheit(celsius) : celsius);
  }
}

function whole({ value }: AbstractControl<number>): ValidationErrors | null {
  return Number.isInteger(value) ? null : { whole: 'Count whole vessels.' };
}
