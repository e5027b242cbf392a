import type { DataSource } from 'typeorm';

export interface ListQuestion {
  readonly status: 'curing' | 'ended' | 'all';
  readonly search: string | undefined;
  readonly offset: number;
  readonly limit: number;
  /** Whether names of designs, waxes and fragrances may be searched as well as the code. */
  readonly recipes: boolean;
}

/** What a batch's page shows beside its estimate; for people who may see recipes. */
export interface BatchDetails {
  readonly designId: string;
  readonly waxName: string;
  readonly fragranceName: string | null;
  readonly loadPercentOfWax: number;
  readonly wick: string;
  readonly vessel: string;
  readonly waxGrams: number;
  readonly fragranceGrams: number;
  readonly pourCelsius: number | null;
  readonly pouredBy: string;
  readonly notes: string;
  readonly verdicts: readonly {
    readonly id: string;
    readonly at: Date;
    readonly passed: boolean;
    readonly note: string;
    readonly signedBy: string;
    readonly hardeningAtTest: number;
    readonly cureAgeDays: number;
  }[];
}

/** What a pour needs to know of a design. */
export interface DesignToPour {
  readonly loadPercentOfWax: number;
  readonly fillGrams: number;
  readonly vesselDiameterMm: number;
}

const ENDED = ['dispatched', 'scrapped'];

/** Reads batches for lists and pages. Every read names the studio. */
export class BatchListRepository {
  constructor(private readonly dataSource: DataSource) {}

  /** Ids of a page of the list, newest pour first, and how many there are altogether. */
  async list(studioId: string, question: ListQuestion): Promise<{ total: number; ids: string[] }> {
    const statuses = { curing: ['curing'], ended: ENDED, all: ['curing', ...ENDED] }[question.status];
    const words = (question.search ?? '').split(/\s+/).filter((word) => word !== '');
    const fields = question.recipes ? ['b.code', 'd.name', 'w.name', 'fr.name'] : ['b.code'];
    const joins =
      words.length > 0 && question.recipes
        ? 'JOIN design d ON d.id = b.design_id JOIN wax w ON w.id = d.wax_id LEFT JOIN fragrance fr ON fr.id = d.fragrance_id'
        : '';
    const matches = words
      .map(() => ` AND (${fields.map((field) => `${field} LIKE ?`).join(' OR ')})`)
      .join('');
    const patterns = words.flatMap((word) => {
      const literal = word.replace(/[\\%_]/g, '\\$&');
      return fields.map(() => `%${literal}%`);
    });
    const from = `FROM batch b ${joins} WHERE b.studio_id = ? AND b.status IN (?)${matches}`;
    const values = [studioId, statuses, ...patterns];
    const [count] = await this.dataSource.query<{ total: number | string }[]>(
      `SELECT COUNT(*) AS total ${from}`,
      values,
    );
    const rows = await this.dataSource.query<{ id: string }[]>(
      `SELECT b.id ${from} ORDER BY b.poured_at DESC, b.id LIMIT ? OFFSET ?`,
      [...values, question.limit, question.offset],
    );
    return { total: Number(count?.total ?? 0), ids: rows.map((row) => row.id) };
  }

  async design(designId: string): Promise<DesignToPour | null> {
    const [row] = await this.dataSource.query<
      { load_percent_of_wax: number; fill_grams: number; vessel_diameter_mm: number }[]
    >('SELECT load_percent_of_wax, fill_grams, vessel_diameter_mm FROM design WHERE id = ?', [designId]);
    if (!row) return null;
    return {
      loadPercentOfWax: row.load_percent_of_wax,
      fillGrams: row.fill_grams,
      vesselDiameterMm: row.vessel_diameter_mm,
    };
  }

  async details(studioId: string, batchId: string): Promise<BatchDetails | null> {
    const [row] = await this.dataSource.query<DetailsRow[]>(
      `SELECT b.design_id, w.name AS wax_name, fr.name AS fragrance_name, d.load_percent_of_wax, d.wick, d.vessel, b.wax_grams, b.fragrance_grams,
              b.pour_celsius, p.name AS poured_by, b.notes
       FROM batch b JOIN design d ON d.id = b.design_id JOIN wax w ON w.id = d.wax_id
       LEFT JOIN fragrance fr ON fr.id = d.fragrance_id LEFT JOIN person p ON p.id = b.poured_by
       WHERE b.id = ? AND b.studio_id = ?`,
      [batchId, studioId],
    );
    if (!row) return null;
    const verdicts = await this.dataSource.query<VerdictRow[]>(
      `SELECT v.id, v.at, v.passed, v.note, p.name AS signed_by, v.hardening_at_test, v.cure_age_days
       FROM burn_verdict v LEFT JOIN person p ON p.id = v.signed_by WHERE v.batch_id = ? ORDER BY v.at DESC, v.id`,
      [batchId],
    );
    return {
      designId: row.design_id,
      waxName: row.wax_name,
      fragranceName: row.fragrance_name,
      loadPercentOfWax: row.load_percent_of_wax,
      wick: row.wick,
      vessel: row.vessel,
      waxGrams: row.wax_grams,
      fragranceGrams: row.fragrance_grams,
      pourCelsius: row.pour_celsius,
      pouredBy: row.poured_by ?? UNKNOWN_PERSON,
      notes: row.notes,
      verdicts: verdicts.map((verdict) => ({
        id: verdict.id,
        at: verdict.at,
        passed: verdict.passed === 1,
        note: verdict.note,
        signedBy: verdict.signed_by ?? UNKNOWN_PERSON,
        hardeningAtTest: verdict.hardening_at_test,
        cureAgeDays: verdict.cure_age_days,
      })),
    };
  }
}

const UNKNOWN_PERSON = 'somebody who is no longer here';

interface DetailsRow {
  design_id: string;
  wax_name: string;
  fragrance_name: string | null;
  load_percent_of_wax: number;
  wick: string;
  vessel: string;
  wax_grams: number;
  fragrance_grams: number;
  pour_celsius: number | null;
  poured_by: string | null;
  notes: string;
}
interface VerdictRow {
  id: string;
  at: Date;
  passed: number;
  note: string;
  signed_by: string | null;
  hardening_at_test: number;
  cure_age_days: number;
}
