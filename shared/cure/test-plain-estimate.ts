import { CELL_MS, cellOf } from '#shared/cure/grid';
import type { CureKinetics } from '#shared/cure/kinetics';
import { rainflow } from '#shared/cure/rainflow';

/**
 * The estimate's rules read a second time, straight from the equations: plain loops over every cell, nothing carried
 * on, nothing shared with the engine but the grid and the rainflow counter (which has its own outside checks).
 */

export interface PlainStay {
  roomId: string;
  fromCell: number;
  /** Not included; null: still there. */
  toCell: number | null;
}

export interface PlainRoom {
  origin: number;
  /** null: gap */
  cells: (number | null)[];
}

interface PlainCell {
  celsius: number;
  observed: boolean;
  /** Which gap, and its sd in K. */
  gap: { key: string; sigma: number } | null;
}

const R = 8.314462618;
const T0 = 273.15;
const T_REF = 21 + T0;

const middle = (values: number[]): number => {
  const sorted = [...values].sort((a, b) => a - b);
  const half = Math.floor(sorted.length / 2);
  return sorted.length % 2 ? sorted[half]! : (sorted[half - 1]! + sorted[half]!) / 2;
};
const hourOf = (cell: number) => new Date(cell * CELL_MS).getUTCHours();

function usual(room: PlainRoom, before: number) {
  const values = new Map<number, number[]>();
  for (let cell = Math.max(room.origin, before - 2016); cell < before; cell++) {
    const celsius = room.cells[cell - room.origin] ?? null;
    if (celsius !== null) values.set(hourOf(cell), [...(values.get(hourOf(cell)) ?? []), celsius]);
  }
  const residuals = [...values.values()].flatMap((list) => list.map((value) => value - middle(list)));
  const centre = residuals.length ? middle(residuals) : 0;
  const mad = residuals.length ? middle(residuals.map((value) => Math.abs(value - centre))) : 0;
  return {
    at: (cell: number): number | null => {
      const list = values.get(hourOf(cell)) ?? [];
      return list.length >= 6 ? middle(list) : null;
    },
    sigma: Math.max(1, 1.4826 * mad),
  };
}

/** Every cell of a room with its filled temperature; null when nothing is known. */
export function plainFill(room: PlainRoom): PlainCell[] | null {
  const filled: PlainCell[] = [];
  const n = room.cells.length;
  for (let i = 0; i < n;) {
    const value = room.cells[i] ?? null;
    if (value !== null) {
      filled.push({ celsius: value, observed: true, gap: null });
      i++;
      continue;
    }
    let end = i;
    while (end < n && (room.cells[end] ?? null) === null) end++;
    const left = i > 0 ? (room.cells[i - 1] ?? null) : null;
    const right = end < n ? (room.cells[end] ?? null) : null;
    const day = usual(room, room.origin + i);
    const short = Math.min(1, (end - i) / 36);
    const temperatures: number[] = [];
    let sigma = day.sigma;
    for (let j = i; j < end; j++) {
      if (left !== null && right !== null && end - i <= 18) {
        temperatures.push(left + ((right - left) * (j - i + 1)) / (end - i + 1));
      } else {
        const atHour = day.at(room.origin + j);
        const known = left ?? right;
        if (atHour === null && known === null) return null;
        if (atHour === null) sigma = 3;
        temperatures.push(atHour ?? known!);
      }
    }
    for (const celsius of temperatures) {
      filled.push({ celsius, observed: false, gap: { key: String(room.origin + i), sigma: sigma * short } });
    }
    i = end;
  }
  return filled;
}

export interface PlainResult {
  hardeningDays: number;
  scentDays: number;
  degreeHours: number;
  cycles: number;
  chanceNow: number;
  t50: number | null;
  t10: number | null;
  t90: number | null;
}

/** Score u/s after each forecast cell is compared with these, each less a chance of 1e-12. */
const LEVELS = { t10: -1.2815515655446004 - 5.7e-12, t50: -2.51e-12, t90: 1.2815515655446004 - 5.7e-12 };

export function plainEstimate(
  pouredAt: number,
  stays: PlainStay[],
  rooms: Map<string, PlainRoom>,
  kinetics: CureKinetics,
  nowCell: number,
  phi: (z: number) => number,
): PlainResult {
  const cells: (PlainCell & { room: string })[] = [];
  for (const stay of stays) {
    const room = rooms.get(stay.roomId)!;
    const filled = plainFill(room)!;
    for (
      let cell = Math.max(stay.fromCell, cellOf(pouredAt));
      cell < Math.min(stay.toCell ?? nowCell, nowCell);
      cell++
    ) {
      cells.push({ ...filled[cell - room.origin]!, room: stay.roomId });
    }
  }
  const rateAt = (celsius: number, energy: number) =>
    celsius > kinetics.softC
      ? 0
      : Math.exp(((-energy * 1000) / R) * (1 / (Math.min(celsius, kinetics.capC) + T0) - 1 / T_REF));
  const kappa = (celsius: number, energy: number) =>
    celsius > kinetics.capC ? 0 : (energy * 1000) / (R * (celsius + T0) ** 2);
  const kappaE = (celsius: number) => (-1000 / R) * (1 / (Math.min(celsius, kinetics.capC) + T0) - 1 / T_REF);
  const doubt = kinetics.calibration ?? { cvD: 0.2, sdEnergy: 15 };

  const clock = (energy: number) => {
    let [days, ak, ake] = [0, 0, 0];
    const gaps = new Map<string, { sum: number; sigma: number }>();
    for (const cell of cells) {
      const a = rateAt(cell.celsius, energy) / 144;
      days += a;
      ak += a * kappa(cell.celsius, energy);
      ake += a * kappaE(cell.celsius);
      if (cell.gap) {
        const key = `${cell.room}/${cell.gap.key}`;
        const so = gaps.get(key) ?? { sum: 0, sigma: cell.gap.sigma };
        so.sum += a * kappa(cell.celsius, energy);
        gaps.set(key, so);
      }
    }
    const gapVariance = [...gaps.values()].reduce((total, { sum, sigma }) => total + (sigma * sum) ** 2, 0);
    return { energy, days, ak, ake, gapVariance };
  };
  const hard = clock(kinetics.hardeningEnergy);
  const scent = clock(kinetics.scentEnergy);

  const current = stays.at(-1)!;
  const room = rooms.get(current.roomId)!;
  const day = usual(room, nowCell);
  const tNow = plainFill(room)![nowCell - 1 - room.origin]!.celsius;
  const ahead = (h: number, cell: number) => {
    const target = day.at(cell) ?? tNow;
    return target + (tNow - target) * Math.exp(-h / 24);
  };
  const score = (sums: typeof hard, needed: number, vf: number) => {
    if (sums.days <= 0) return -Infinity;
    const s2 =
      doubt.cvD ** 2 +
      ((doubt.sdEnergy * sums.ake) / sums.days) ** 2 +
      ((0.5 * sums.ak) / sums.days) ** 2 +
      (sums.gapVariance + vf) / sums.days ** 2;
    return Math.log(sums.days / needed) / Math.sqrt(s2);
  };
  const both = (vfHard: number, vfScent: number) =>
    Math.min(score(hard, kinetics.testDays, vfHard), score(scent, kinetics.scentDays, vfScent));

  const result: PlainResult = {
    hardeningDays: hard.days,
    scentDays: scent.days,
    degreeHours: cells.reduce(
      (sum, { celsius }) => sum + Math.max(0, celsius - (kinetics.frostingFrom ?? 999)) / 6,
      0,
    ),
    cycles: rainflow(cells.filter(({ observed }) => observed).map(({ celsius }) => celsius))
      .filter(({ range }) => range >= 2)
      .reduce((sum, { range, count }) => sum + count * (range / 5) ** 2, 0),
    chanceNow: phi(both(0, 0)),
    t10: null,
    t50: null,
    t90: null,
  };
  const open = new Set<'t10' | 't50' | 't90'>();
  const now = both(0, 0);
  for (const level of ['t10', 't50', 't90'] as const) if (now < LEVELS[level]) open.add(level);
  const before = { hard: hard.ak, scent: scent.ak };
  for (let k = 1; k <= 180 * 144 && open.size > 0; k++) {
    const cell = nowCell + k - 1;
    const celsius = ahead((k - 0.5) / 6, cell);
    for (const sums of [hard, scent]) {
      const a = rateAt(celsius, sums.energy) / 144;
      sums.days += a;
      sums.ak += a * kappa(celsius, sums.energy);
      sums.ake += a * kappaE(celsius);
    }
    const h = k / 6;
    const bracket =
      1.5 ** 2 * 24 ** 2 * ((2 * h) / 24 - 3 + 4 * Math.exp(-h / 24) - Math.exp((-2 * h) / 24)) + h ** 2;
    const vf = (sum: number) => (((sum * 144) / k) ** 2 * bracket) / 576;
    const at = both(vf(hard.ak - before.hard), vf(scent.ak - before.scent));
    for (const level of [...open]) {
      if (at >= LEVELS[level]) {
        result[level] = (nowCell + k) * CELL_MS;
        open.delete(level);
      }
    }
  }
  return result;
}
