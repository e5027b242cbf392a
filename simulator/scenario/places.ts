import type { RoomLimits } from '#shared/contract/rooms';
import type { RoomBuild } from '../physics/room-model.js';
import type { Fault } from '../physics/sensor-model.js';
import type { Climate } from '../physics/weather.js';

/** A room of the demo: how it is built, what stands in it, how it is measured. */
export interface DemoRoom {
  readonly key: string;
  readonly name: string;
  readonly limits: RoomLimits;
  readonly notes: string;
  readonly build: RoomBuild;
  readonly racks: number;
  readonly shelves: readonly number[];
  readonly sensors: readonly DemoSensor[];
}

export interface DemoSensor {
  readonly deviceId: string;
  readonly name: string;
  readonly bias: number;
  readonly offsetCelsius: number;
  /** Fault that began this many days before now. */
  readonly fault: { readonly fault: Fault; readonly daysAgo: number } | null;
}

export interface DemoStudio {
  readonly key: string;
  readonly name: string;
  readonly timeZone: string;
  readonly unit: 'C' | 'F';
  readonly address: string;
  readonly pressureHpa: number;
  readonly climate: Climate;
  readonly rooms: readonly DemoRoom[];
}

/** Seconds between readings of every demo sensor. */
export const DEMO_INTERVAL_SECONDS = 20;

const limits = (bandLow: number, bandHigh: number, change: Partial<RoomLimits> = {}): RoomLimits => ({
  ...{ bandLow, bandHigh, heatLimit: null, humidityHigh: 65, swingLimit: 5, slipDays: 2 },
  ...change,
});

const build = (seed: number, change: Partial<RoomBuild>): RoomBuild => ({
  seed,
  ...{
    timeConstant: 14,
    gain: 1.5,
    exposure: 0.25,
    house: 20,
    heatTo: 19.5,
    heater: 3,
    coolTo: null,
    cooler: 0,
  },
  ...{ airing: 1.6, moisture: 0.0005 },
  ...change,
});

const sensor = (deviceId: string, name: string, change: Partial<DemoSensor> = {}): DemoSensor => ({
  deviceId,
  name,
  ...{ bias: 0, offsetCelsius: 0, fault: null },
  ...change,
});

/** Three studios in three time zones, seven cure rooms, forty racks. Invented. */
export const DEMO_STUDIOS: readonly DemoStudio[] = [
  {
    key: 'quay',
    name: 'Quay Street',
    timeZone: 'Europe/Lisbon',
    unit: 'C',
    address: 'Quay Street 4, upper and lower floor',
    pressureHpa: 1015,
    climate: { seed: 11, mean: 16, season: 2, day: 3, fronts: 2.5, hoursAhead: -0.6, humidity: 58 },
    rooms: [
      {
        key: 'loft',
        name: 'Loft',
        limits: limits(18, 24),
        notes: 'Under the roof: warm on clear days. Keep soy on the north wall.',
        build: build(101, { timeConstant: 7, exposure: 0.3, house: 21.2, heatTo: 19.5 }),
        racks: 6,
        shelves: [30, 30, 30, 24],
        sensors: [
          sensor('quay-loft-north', 'Loft, north wall', { bias: 0.1 }),
          sensor('quay-loft-south', 'Loft, south wall', { bias: 0.4, offsetCelsius: -0.3 }),
        ],
      },
      {
        key: 'cellar',
        name: 'Cellar',
        limits: limits(18, 22),
        notes: 'The steadiest room of the house.',
        build: build(102, {
          timeConstant: 40,
          exposure: 0.06,
          house: 19.2,
          heatTo: 19.6,
          gain: 0.9,
          airing: 4,
        }),
        racks: 6,
        shelves: [30, 30, 30, 30],
        sensors: [
          sensor('quay-cellar-a', 'Cellar, left'),
          sensor('quay-cellar-b', 'Cellar, right', { bias: -0.1 }),
        ],
      },
      {
        key: 'annexe',
        name: 'Annexe',
        limits: limits(18, 23),
        notes: 'Door to the yard; expect swings when pallets come.',
        build: build(103, { timeConstant: 9, exposure: 0.3, heatTo: 19.4, coolTo: 22.5, cooler: 3 }),
        racks: 5,
        shelves: [30, 30, 24],
        sensors: [sensor('quay-annexe', 'Annexe')],
      },
    ],
  },
  {
    key: 'barn',
    name: 'High Barn',
    timeZone: 'Europe/Helsinki',
    unit: 'C',
    address: 'High Barn, by the mill pond',
    pressureHpa: 1008,
    climate: { seed: 23, mean: 9, season: 2, day: 3, fronts: 3, hoursAhead: 1.5, humidity: 64 },
    rooms: [
      {
        key: 'south',
        name: 'South room',
        limits: limits(18, 23),
        notes: 'The old radiator does not keep up in cold weeks.',
        build: build(201, {
          timeConstant: 16,
          exposure: 0.34,
          house: 19,
          gain: 1.8,
          heatTo: 19,
          heater: 0.08,
          airing: 3,
        }),
        racks: 6,
        shelves: [30, 30, 30, 30],
        sensors: [
          sensor('barn-south-a', 'South, window'),
          sensor('barn-south-b', 'South, back', { fault: { fault: 'drifting', daysAgo: 16 } }),
          sensor('barn-south-c', 'South, door', { bias: 0.1 }),
        ],
      },
      {
        key: 'north',
        name: 'North room',
        limits: limits(18, 23),
        notes: '',
        build: build(202, {
          timeConstant: 22,
          exposure: 0.12,
          house: 19.8,
          heatTo: 19.8,
          gain: 1,
          airing: 3,
        }),
        racks: 6,
        shelves: [30, 30, 24],
        sensors: [sensor('barn-north', 'North room', { fault: { fault: 'silent', daysAgo: 0.03 } })],
      },
    ],
  },
  {
    key: 'juniper',
    name: 'Juniper Yard',
    timeZone: 'America/Denver',
    unit: 'F',
    address: 'Juniper Yard, unit 7',
    pressureHpa: 838,
    climate: { seed: 37, mean: 13, season: 3, day: 6, fronts: 3, hoursAhead: -7, humidity: 45 },
    rooms: [
      {
        key: 'main',
        name: 'Main room',
        limits: limits(18.5, 23.5),
        notes: 'Air conditioning serviced in spring.',
        build: build(301, {
          timeConstant: 12,
          exposure: 0.2,
          heatTo: 20.4,
          heater: 4,
          coolTo: 22.4,
          cooler: 4,
        }),
        racks: 6,
        shelves: [30, 30, 30, 24],
        sensors: [
          sensor('juniper-main-a', 'Main, east'),
          sensor('juniper-main-b', 'Main, west', { bias: 0.2 }),
        ],
      },
      {
        key: 'back',
        name: 'Back room',
        limits: limits(18, 24, { swingLimit: 4 }),
        notes: 'Thin walls: follows the day.',
        build: build(302, { timeConstant: 4, exposure: 0.42, house: 20.5, heatTo: 18.6, heater: 4 }),
        racks: 5,
        shelves: [30, 24, 24],
        sensors: [sensor('juniper-back', 'Back room', { fault: { fault: 'battery-low', daysAgo: 4 } })],
      },
    ],
  },
];

/** Warm and cold spells, in days before now, K. */
export const DEMO_SPELLS = {
  quay: [{ fromDaysAgo: 41, toDaysAgo: 35, warmer: 9 }],
  barn: [{ fromDaysAgo: 7, toDaysAgo: -6, warmer: -7 }],
  juniper: [{ fromDaysAgo: 63, toDaysAgo: 58, warmer: 7 }],
} as const;

/** The Loft's radiator is stuck around the instant the story is told at: heat in K/h. */
export const DEMO_STUCK_HEAT = { room: 'loft', hoursAgo: 5, endsInHours: 2, heat: 1.7 } as const;
