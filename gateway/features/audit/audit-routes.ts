import { auditRoutes } from '#shared/contract/audit';
import { type Mounted, mount } from '../../http/mount.js';
import type { Audit } from './audit.js';

export function mountAudit(audit: Audit): Mounted[] {
  return [mount(auditRoutes.list, ({ query }) => audit.list(query))];
}
