import type { DataSource } from 'typeorm';
import type { BatchesChanged, CellsChanged, CommittedReading, LayoutChanged } from './announcements.js';
import type { Clock } from './clock.js';
import { Batches } from './features/batches/batches.js';
import { BatchListRepository } from './features/batches/batch-list-repository.js';
import { BatchesRepository } from './features/batches/batches-repository.js';
import { mountBatches } from './features/batches/batches-routes.js';
import { Compare } from './features/compare/compare.js';
import { CompareRepository } from './features/compare/compare-repository.js';
import { mountCompare } from './features/compare/compare-routes.js';
import { BatchFactsRepository } from './features/estimates/batch-facts-repository.js';
import { Estimates } from './features/estimates/estimates.js';
import { Standing } from './features/estimates/standing.js';
import { Materials } from './features/materials/materials.js';
import { MaterialsRepository } from './features/materials/materials-repository.js';
import { mountMaterials } from './features/materials/materials-routes.js';
import { LatestReadings } from './features/overview/latest-readings.js';
import { LatestReadingsRepository } from './features/overview/latest-readings-repository.js';
import { Overview, type OverviewParts } from './features/overview/overview.js';
import { mountOverview } from './features/overview/overview-routes.js';
import { RoomsNow } from './features/overview/rooms-now.js';
import { Racks } from './features/racks/racks.js';
import { RacksRepository } from './features/racks/racks-repository.js';
import { mountRacks } from './features/racks/racks-routes.js';
import { RoomSeries } from './features/rooms/room-series.js';
import { RoomSeriesRepository } from './features/rooms/room-series-repository.js';
import { Rooms } from './features/rooms/rooms.js';
import { RoomsRepository } from './features/rooms/rooms-repository.js';
import { mountRooms } from './features/rooms/rooms-routes.js';
import { Feed } from './feed.js';
import { RoomCellsRepository } from './history/room-cells-repository.js';
import { type HistoriesChanged, RoomHistories } from './history/room-histories.js';
import type { Mounted } from './http/mount.js';

export interface FloorNeeds {
  readonly dataSource: DataSource;
  readonly clock: Clock;
  readonly committed: Feed<readonly CommittedReading[]>;
  readonly cells: Feed<CellsChanged>;
  readonly layout: Feed<LayoutChanged>;
  readonly batches: Feed<BatchesChanged>;
  readonly studios: OverviewParts['studios'];
  readonly alerts: OverviewParts['alerts'];
  readonly failed: (error: unknown) => void;
}

/** The cure floor: rooms, racks, materials, batches and all that is computed of them. */
export interface Floor {
  readonly mounted: readonly Mounted[];
  readonly rooms: Rooms;
  readonly histories: RoomHistories;
  readonly estimates: Estimates;
  readonly standing: Standing;
  readonly roomsNow: RoomsNow;
  /** Announced when rooms' ten-minute histories gained or changed cells. */
  readonly historiesChanged: Feed<HistoriesChanged>;
  /** Loads what is curing and follows what is announced; the readings' feeds may already be speaking. */
  start(): Promise<void>;
  stop(): Promise<void>;
}

/** Joins the parts of the cure floor; nothing runs before `start`. */
export function assembleFloor(needs: FloorNeeds): Floor {
  const { dataSource, clock, layout, failed } = needs;
  const historiesChanged = new Feed<HistoriesChanged>(failed);
  const cells = new RoomCellsRepository(dataSource);
  const histories = new RoomHistories({ cells, clock, changed: historiesChanged, failed });
  const estimates = new Estimates({
    facts: new BatchFactsRepository(dataSource),
    histories,
    clock,
    changed: needs.batches,
    failed,
  });
  const standing = new Standing(estimates, histories);
  const latestRepository = new LatestReadingsRepository(dataSource);
  const roomsNow = new RoomsNow({
    repository: latestRepository,
    latest: new LatestReadings(latestRepository),
    cells,
    histories,
    estimates,
    standing,
    clock,
    failed,
  });
  const changed = (studioId: string, roomId: string) => layout.announce({ studioId, roomId });
  const rooms = new Rooms(new RoomsRepository(dataSource), clock, changed);
  const racks = new Racks(new RacksRepository(dataSource), rooms, clock, changed);
  const materials = new Materials(new MaterialsRepository(dataSource), clock, async (waxId) => {
    const studios = await estimates.madeOfTouched({ waxId });
    for (const studioId of studios) layout.announce({ studioId, roomId: null });
  });
  const batches = new Batches({
    repository: new BatchesRepository(dataSource),
    lists: new BatchListRepository(dataSource),
    estimates,
    clock,
  });
  const series = new RoomSeries({
    repository: new RoomSeriesRepository(dataSource),
    cells,
    rooms,
    standing,
    clock,
  });
  const { studios, alerts } = needs;
  const overview = new Overview({ studios, rooms, racks, alerts, estimates, roomsNow, clock });
  const compare = new Compare({
    repository: new CompareRepository(dataSource),
    studios,
    cells,
    estimates,
    clock,
  });
  return {
    mounted: [
      ...mountRooms(rooms, series),
      ...mountRacks(racks),
      ...mountMaterials(materials),
      ...mountBatches(batches),
      ...mountOverview(overview),
      ...mountCompare(compare),
    ],
    ...{ rooms, histories, estimates, standing, roomsNow, historiesChanged },
    async start() {
      histories.start(needs.cells, layout);
      await estimates.start(historiesChanged, layout);
      await roomsNow.start(needs.committed, historiesChanged, layout);
    },
    async stop() {
      await histories.stop();
      await estimates.stop();
      await roomsNow.stop();
    },
  };
}
