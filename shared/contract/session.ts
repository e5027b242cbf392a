import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { STUDIO_ROLES } from '#shared/contract/roles';
import { defineRoute } from '#shared/contract/route';

export const me = z.object({
  id: f.id,
  name: z.string(),
  email: z.string(),
  owner: z.boolean(),
  memberships: z.array(z.object({ studioId: f.id, role: z.enum(STUDIO_ROLES) })),
  company: z.string(),
  /** True in the demo: the page then links to the demo desk. */
  demo: z.object({ deskUrl: z.string() }).nullable(),
});
export type Me = z.infer<typeof me>;

/** Access token for 10 minutes; the refresh token travels only in an HttpOnly cookie. */
export const signedIn = z.object({ accessToken: z.string(), expiresAt: f.instant, me });
export type SignedIn = z.infer<typeof signedIn>;

export const session = z.object({
  id: f.id,
  createdAt: f.instant,
  lastUsedAt: f.instant,
  userAgent: z.string(),
  address: z.string(),
  current: z.boolean(),
});
export type Session = z.infer<typeof session>;

const tokenParams = z.object({ token: z.string().min(20).max(200) }).strict();

export const sessionRoutes = {
  signIn: defineRoute({
    method: 'POST',
    path: '/api/sign-in',
    scope: 'public',
    permission: null,
    title: 'Sign in with e-mail and password',
    params: f.none,
    query: f.none,
    body: z.object({ email: f.email, password: z.string().min(1).max(200) }).strict(),
    reply: signedIn,
  }),
  refresh: defineRoute({
    method: 'POST',
    path: '/api/session/refresh',
    scope: 'public',
    permission: null,
    title: 'Exchange the refresh cookie for a new access token',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: signedIn,
  }),
  signOut: defineRoute({
    method: 'POST',
    path: '/api/session/sign-out',
    scope: 'public',
    permission: null,
    title: 'End this session',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: f.nothing,
  }),
  me: defineRoute({
    method: 'GET',
    path: '/api/me',
    scope: 'self',
    permission: null,
    title: 'Who is signed in',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: me,
  }),
  sessions: defineRoute({
    method: 'GET',
    path: '/api/me/sessions',
    scope: 'self',
    permission: null,
    title: 'Own sessions',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: z.array(session),
  }),
  endSession: defineRoute({
    method: 'DELETE',
    path: '/api/me/sessions/:sessionId',
    scope: 'self',
    permission: null,
    title: 'End one of the own sessions',
    params: z.object({ sessionId: f.id }).strict(),
    query: f.none,
    body: f.noBody,
    reply: f.nothing,
  }),
  changePassword: defineRoute({
    method: 'POST',
    path: '/api/me/password',
    scope: 'self',
    permission: null,
    title: 'Change the own password; ends every other session',
    params: f.none,
    query: f.none,
    body: z.object({ current: z.string().min(1).max(200), next: f.password }).strict(),
    reply: f.nothing,
  }),
  forgotPassword: defineRoute({
    method: 'POST',
    path: '/api/password/forgot',
    scope: 'public',
    permission: null,
    title: 'Ask for a password link by e-mail (the answer never tells whether the address is known)',
    params: f.none,
    query: f.none,
    body: z.object({ email: f.email }).strict(),
    reply: f.nothing,
  }),
  resetPassword: defineRoute({
    method: 'POST',
    path: '/api/password/reset',
    scope: 'public',
    permission: null,
    title: 'Set a new password with the link from the e-mail',
    params: f.none,
    query: f.none,
    body: z.object({ token: z.string().min(20).max(200), password: f.password }).strict(),
    reply: f.nothing,
  }),
  invitation: defineRoute({
    method: 'GET',
    path: '/api/invitations/:token',
    scope: 'public',
    permission: null,
    title: 'What an invitation is for',
    params: tokenParams,
    query: f.none,
    body: f.noBody,
    reply: z.object({
      company: z.string(),
      email: z.string(),
      invitedBy: z.string(),
      studios: z.array(z.object({ name: z.string(), role: z.enum(STUDIO_ROLES) })),
      owner: z.boolean(),
    }),
  }),
  acceptInvitation: defineRoute({
    method: 'POST',
    path: '/api/invitations/:token/accept',
    scope: 'public',
    permission: null,
    title: 'Accept an invitation with a name and a password',
    params: tokenParams,
    query: f.none,
    body: z.object({ name: f.name, password: f.password }).strict(),
    reply: f.nothing,
  }),
};
