import { describe, expect, it } from 'vitest';
import { ALL_ROUTES } from '#shared/contract/all-routes';
import { assemble } from '../assemble.js';
import { createLog } from '../create-log.js';
import { readSettings } from '../settings.js';

describe('the assembled gateway', () => {
  const settings = readSettings({ STILLROOM_DB_PASSWORD: 'x', STILLROOM_JWT_SECRET: 'x'.repeat(32) });
  const { mounted } = assemble(settings, createLog('silent'));

  it.each(ALL_ROUTES.map(({ name, route }) => [name, route] as const))(
    'answers %s exactly once',
    (_name, route) => {
      expect(mounted.filter((one) => one.route === route)).toHaveLength(1);
    },
  );

  it('answers nothing that the contract does not name', () => {
    const named = new Set(ALL_ROUTES.map(({ route }) => route));
    expect(mounted.filter(({ route }) => !named.has(route))).toEqual([]);
  });

  it('has one address for each route', () => {
    const addresses = ALL_ROUTES.map(
      ({ route }) => `${route.method} ${route.path.replaceAll(/:\w+/g, ':x')}`,
    );
    expect(new Set(addresses).size).toBe(addresses.length);
  });
});
