import type { StudioComparison, compareRoutes } from '#shared/contract/compare';
import { may } from '#shared/contract/roles';
import type { ReplyOf } from '#shared/contract/route';
import type { Studio } from '#shared/contract/studios';
import { cellOf } from '#shared/cure/grid';
import { median } from '#shared/statistics/median';
import type { Clock } from '../../clock.js';
import type { RoomCells } from '../../history/room-histories.js';
import type { SignedInPerson } from '../../http/actor.js';
import type { Estimates } from '../estimates/estimates.js';
import { checkedPeriod, measuredCells, type Period } from '../rooms/room-series.js';
import { type BatchOverNominal, comparePairs, overNominalByFamily } from './compare-pairs.js';
import type { AlertToCompare, CompareRepository, RoomToCompare } from './compare-repository.js';
import { poolMeasures, type RoomCellsOfPeriod } from './pooled-measures.js';

export interface CompareParts {
  readonly repository: CompareRepository;
  readonly studios: { list(person: SignedInPerson): Promise<Studio[]> };
  readonly cells: Pick<RoomCells, 'cells'>;
  readonly estimates: Pick<Estimates, 'daysToTest'>;
  readonly clock: Clock;
}

const DAY_MS = 86_400_000;

/** Studios side by side over a period: what their rooms did and how long their batches took. */
export class Compare {
  constructor(private readonly parts: CompareParts) {}

  /** Only the studios in which the person may compare. The unit of every test is the batch, never the reading. */
  async compare(person: SignedInPerson, period: Period): Promise<ReplyOf<typeof compareRoutes.compare>> {
    const { from, to: asked } = checkedPeriod(period);
    const to = Math.max(from, Math.min(asked, this.parts.clock.now()));
    const studios = (await this.parts.studios.list(person)).filter(({ role }) => may(role, 'compare.read'));
    const ids = studios.map(({ id }) => id);
    const [rooms, alerts, taken] = await Promise.all([
      this.parts.repository.rooms(ids),
      this.parts.repository.alerts(ids, new Date(from), new Date(to)),
      this.parts.estimates.daysToTest(ids, from, to),
    ]);
    const batches = taken.map(({ studioId, family, days, nominalDays }) => ({
      ...{ studioId, family },
      daysOver: days - nominalDays,
    }));
    const compared: StudioComparison[] = [];
    for (const studio of studios) {
      const ofStudio = <T extends { readonly studioId: string }>(things: readonly T[]) =>
        things.filter(({ studioId }) => studioId === studio.id);
      compared.push(
        await this.#studio(studio, ofStudio(rooms), ofStudio(alerts), ofStudio(batches), from, to),
      );
    }
    return { ...period, studios: compared, pairs: comparePairs(ids, batches) };
  }

  async #studio(
    { id, name, timeZone }: Studio,
    rooms: readonly RoomToCompare[],
    alerts: readonly AlertToCompare[],
    batches: readonly BatchOverNominal[],
    from: number,
    to: number,
  ): Promise<StudioComparison> {
    const measured: RoomCellsOfPeriod[] = [];
    for (const room of rooms) {
      const run = (await this.parts.cells.cells([room.id], cellOf(from), cellOf(to))).get(room.id);
      // A room that was never heard in the period has nothing to be compared by.
      if (run?.celsius.some((celsius) => !Number.isNaN(celsius)))
        measured.push({ cells: measuredCells(run, timeZone), band: room.band });
    }
    const roomDays = (measured.length * (to - from)) / DAY_MS;
    const answers = alerts.flatMap(({ minutesToAnswer }) => minutesToAnswer ?? []);
    return {
      studioId: id,
      studioName: name,
      ...poolMeasures(measured),
      roomDays,
      alertsPerRoomDay: roomDays === 0 ? null : alerts.length / roomDays,
      minutesToAnswer: answers.length === 0 ? null : median(answers),
      daysOverNominal: overNominalByFamily(batches),
    };
  }
}
