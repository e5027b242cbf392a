import type { DataSource } from 'typeorm';
import { kinetics as kineticsSchema, waxFamily } from '#shared/contract/materials';
import type { WaxFamilyName } from '#shared/cure/wax-families';
import type { CureKinetics } from '#shared/cure/kinetics';

/** A verdict of a wick test. Times in epoch ms. */
export interface TestFacts {
  readonly batchId: string;
  readonly at: number;
  readonly passed: boolean;
  readonly hardeningAtTest: number;
}

/** What an estimate needs of a design and its wax. */
export interface DesignFacts {
  readonly id: string;
  readonly name: string;
  readonly waxId: string;
  readonly waxName: string;
  readonly family: WaxFamilyName;
  readonly kinetics: CureKinetics;
  readonly provenance: string;
  readonly loadPercentOfWax: number;
  /** Verdicts on any batch of this design, oldest first. */
  readonly tests: readonly TestFacts[];
}

/** A batch's time on one shelf. Times in epoch ms; `to` is null while it stands there. */
export interface StayFacts {
  readonly id: string;
  readonly shelfId: string;
  readonly rackId: string;
  readonly roomId: string;
  readonly roomName: string;
  readonly rackName: string;
  readonly shelfPosition: number;
  readonly from: number;
  readonly to: number | null;
}

/** What an estimate needs of a batch. Times in epoch ms. */
export interface BatchFacts {
  readonly id: string;
  readonly studioId: string;
  readonly code: string;
  readonly design: DesignFacts;
  readonly vessels: number;
  readonly pouredAt: number;
  readonly status: 'curing' | 'dispatched' | 'scrapped';
  readonly endedAt: number | null;
  readonly version: number;
  /** Oldest first, without overlaps. */
  readonly stays: readonly StayFacts[];
}

/** Reads what estimates are made of. */
export class BatchFactsRepository {
  constructor(private readonly dataSource: DataSource) {}

  /** Every curing batch of every studio. */
  curing(): Promise<BatchFacts[]> {
    return this.load(`b.status = 'curing'`, []);
  }

  async some(batchIds: readonly string[]): Promise<BatchFacts[]> {
    return batchIds.length === 0 ? [] : this.load('b.id IN (?)', [batchIds]);
  }

  /** Batches of studios that stood somewhere in a period, curing or ended. */
  async curedWithin(studioIds: readonly string[], from: Date, to: Date): Promise<BatchFacts[]> {
    if (studioIds.length === 0) return [];
    return this.load(
      `b.studio_id IN (?) AND b.status <> 'scrapped' AND b.poured_at < ? AND (b.ended_at IS NULL OR b.ended_at >= ?)`,
      [studioIds, to, from],
    );
  }

  private async load(where: string, values: readonly unknown[]): Promise<BatchFacts[]> {
    const designs = await this.designs();
    const batches = await this.dataSource.query<BatchRow[]>(
      `SELECT b.id, b.studio_id, b.code, b.design_id, b.vessels, b.poured_at, b.status, b.ended_at, b.version FROM batch b WHERE ${where}`,
      [...values],
    );
    const stays = await this.dataSource.query<StayRow[]>(
      `SELECT s.id, s.batch_id, s.shelf_id, s.room_id, s.from_at, s.to_at, sh.rack_id, sh.position, k.name AS rack_name, r.name AS room_name
       FROM batch b JOIN stay s ON s.batch_id = b.id JOIN shelf sh ON sh.id = s.shelf_id JOIN rack k ON k.id = sh.rack_id JOIN room r ON r.id = s.room_id
       WHERE ${where} ORDER BY s.batch_id, s.from_at`,
      [...values],
    );
    const staysOf = new Map<string, StayFacts[]>();
    for (const row of stays) {
      const list = staysOf.get(row.batch_id);
      if (list) list.push(toStay(row));
      else staysOf.set(row.batch_id, [toStay(row)]);
    }
    return batches.flatMap((row) => {
      const design = designs.get(row.design_id);
      return design ? [toBatch(row, design, staysOf.get(row.id) ?? [])] : [];
    });
  }

  private async designs(): Promise<Map<string, DesignFacts>> {
    const rows = await this.dataSource.query<DesignRow[]>(
      `SELECT d.id, d.name, d.load_percent_of_wax, w.id AS wax_id, w.name AS wax_name, w.family, w.kinetics, w.provenance
       FROM design d JOIN wax w ON w.id = d.wax_id`,
    );
    const verdicts = await this.dataSource.query<VerdictRow[]>(
      'SELECT batch_id, design_id, at, passed, hardening_at_test FROM burn_verdict ORDER BY at, id',
    );
    const testsOf = new Map<string, TestFacts[]>();
    for (const row of verdicts) {
      const test = {
        batchId: row.batch_id,
        at: row.at.getTime(),
        passed: row.passed === 1,
        hardeningAtTest: row.hardening_at_test,
      };
      testsOf.set(row.design_id, [...(testsOf.get(row.design_id) ?? []), test]);
    }
    // One object per wax, so that batches of one wax can share what is computed from its numbers.
    const kineticsOf = new Map<string, CureKinetics>();
    return new Map(
      rows.map((row) => {
        let kinetics = kineticsOf.get(row.wax_id);
        if (!kinetics) {
          kinetics = kineticsSchema.parse(JSON.parse(row.kinetics));
          kineticsOf.set(row.wax_id, kinetics);
        }
        return [
          row.id,
          {
            id: row.id,
            name: row.name,
            waxId: row.wax_id,
            waxName: row.wax_name,
            family: waxFamily.parse(row.family),
            kinetics,
            provenance: row.provenance,
            loadPercentOfWax: row.load_percent_of_wax,
            tests: testsOf.get(row.id) ?? [],
          },
        ];
      }),
    );
  }
}

interface DesignRow {
  id: string;
  name: string;
  load_percent_of_wax: number;
  wax_id: string;
  wax_name: string;
  family: string;
  kinetics: string;
  provenance: string;
}
interface VerdictRow {
  batch_id: string;
  design_id: string;
  at: Date;
  passed: number;
  hardening_at_test: number;
}
interface BatchRow {
  id: string;
  studio_id: string;
  code: string;
  design_id: string;
  vessels: number;
  poured_at: Date;
  status: BatchFacts['status'];
  ended_at: Date | null;
  version: number;
}
interface StayRow {
  id: string;
  batch_id: string;
  shelf_id: string;
  room_id: string;
  from_at: Date;
  to_at: Date | null;
  rack_id: string;
  position: number;
  rack_name: string;
  room_name: string;
}

function toStay(row: StayRow): StayFacts {
  return {
    id: row.id,
    shelfId: row.shelf_id,
    rackId: row.rack_id,
    roomId: row.room_id,
    roomName: row.room_name,
    rackName: row.rack_name,
    shelfPosition: row.position,
    from: row.from_at.getTime(),
    to: row.to_at?.getTime() ?? null,
  };
}

function toBatch(row: BatchRow, design: DesignFacts, stays: readonly StayFacts[]): BatchFacts {
  return {
    id: row.id,
    studioId: row.studio_id,
    code: row.code,
    design,
    vessels: row.vessels,
    pouredAt: row.poured_at.getTime(),
    status: row.status,
    endedAt: row.ended_at?.getTime() ?? null,
    version: row.version,
    stays,
  };
}
