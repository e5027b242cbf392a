import { randomBytes } from 'node:crypto';
import type { EntityManager } from 'typeorm';
import { hashToken } from './token-hash.js';

export type LinkKind = 'invitation' | 'password';

/** How long a mailed link is good. */
export const LINK_LIFETIME_MS: Record<LinkKind, number> = {
  invitation: 7 * 86_400_000,
  password: 60 * 60_000,
};

const PAGE: Record<LinkKind, string> = { invitation: 'invitation', password: 'reset-password' };

export interface NewLink {
  readonly kind: LinkKind;
  readonly personId: string;
  readonly createdBy: string | null;
  readonly now: Date;
}

/** A link that was just made. The token is in no table; only its hash is. */
export interface MadeLink {
  readonly token: string;
  readonly tokenHash: string;
  readonly expiresAt: Date;
}

/** Makes a single-use link in the caller's transaction; earlier links of the kind to the same person stop working. */
export async function makeLink(manager: EntityManager, link: NewLink): Promise<MadeLink> {
  const token = randomBytes(32).toString('base64url');
  const tokenHash = hashToken(token);
  const expiresAt = new Date(link.now.getTime() + LINK_LIFETIME_MS[link.kind]);
  await voidLinks(manager, link.personId, [link.kind], link.now);
  await manager.query(
    'INSERT INTO mailed_link (token_hash, kind, person_id, created_by, created_at, expires_at) VALUES (?,?,?,?,?,?)',
    [tokenHash, link.kind, link.personId, link.createdBy, link.now, expiresAt],
  );
  return { token, tokenHash, expiresAt };
}

/** Makes links of a person useless. */
export async function voidLinks(
  manager: EntityManager,
  personId: string,
  kinds: readonly LinkKind[],
  now: Date,
): Promise<void> {
  await manager.query(
    'UPDATE mailed_link SET used_at = ? WHERE person_id = ? AND kind IN (?) AND used_at IS NULL',
    [now, personId, kinds],
  );
}

/** Uses a link up. False when it was used before, has expired or never was. */
export async function useLink(
  manager: EntityManager,
  kind: LinkKind,
  tokenHash: string,
  now: Date,
): Promise<boolean> {
  const result = await manager.query<{ affectedRows: number }>(
    'UPDATE mailed_link SET used_at = ? WHERE token_hash = ? AND kind = ? AND used_at IS NULL AND expires_at > ?',
    [now, tokenHash, kind, now],
  );
  return result.affectedRows === 1;
}

/** The address of the page that a link opens. */
export function linkUrl(publicUrl: string, kind: LinkKind, token: string): string {
  return `${publicUrl}/${PAGE[kind]}/${token}`;
}
