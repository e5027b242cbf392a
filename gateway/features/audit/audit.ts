import type { AuditEntry } from '#shared/contract/audit';
import { ProblemError } from '../../http/problem-error.js';
import type { AuditRepository } from './audit-repository.js';

/** The audit trail: who changed what, when, from where. */
export class Audit {
  constructor(private readonly repository: AuditRepository) {}

  /** @throws ProblemError bad-input when `before` is not the id of a line */
  list(query: { thingId?: string; before?: string; limit: number }): Promise<AuditEntry[]> {
    const { thingId = null, before = null, limit } = query;
    if (before !== null && !/^\d{1,19}$/.test(before)) {
      throw new ProblemError('bad-input', 'Give the id of the last line you have.', [
        { path: 'before', message: 'Not the id of a line.' },
      ]);
    }
    return this.repository.list({ thingId, before, limit });
  }
}
