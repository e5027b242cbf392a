import type { EntityManager } from 'typeorm';

/** Ends the open sessions of a person in the caller's transaction, all but one if one is named; returns their ids. */
export async function endSessions(
  manager: EntityManager,
  which: {
    readonly personId: string;
    readonly except: string | null;
    readonly because: string;
    readonly now: Date;
  },
): Promise<string[]> {
  const { personId, except, because, now } = which;
  const rows = await manager.query<{ id: string }[]>(
    'SELECT id FROM session WHERE person_id = ? AND ended_at IS NULL AND id <> ? FOR UPDATE',
    [personId, except ?? ''],
  );
  const ids = rows.map((row) => row.id);
  if (ids.length > 0)
    await manager.query('UPDATE session SET ended_at = ?, ended_because = ? WHERE id IN (?)', [
      now,
      because,
      ids,
    ]);
  return ids;
}
