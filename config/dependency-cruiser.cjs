/** Who may import whom. `npm run lint:imports` checks it. */
const specs = '\\.spec\\.ts$|/test-[^/]+\\.ts$';

/** A rule that forbids code under `from` to reach anything under `to`, specs excepted. */
const forbid = (name, from, to, comment) => ({
  name,
  comment,
  severity: 'error',
  from: typeof from === 'string' ? { path: from, pathNot: specs } : { pathNot: specs, ...from },
  to: typeof to === 'string' ? { path: to } : to,
});
const npm = (...names) => `node_modules/(${names.join('|')})(/|$)`;

module.exports = {
  forbidden: [
    {
      name: 'no-circles',
      severity: 'error',
      comment: 'Two files that need each other are one file, or a third is missing.',
      from: {},
      to: { circular: true },
    },
    forbid(
      'shared-is-pure',
      '^shared/',
      '^(gateway|simulator|web|e2e|config)/',
      'shared knows none of its users.',
    ),
    {
      name: 'shared-has-no-node',
      severity: 'error',
      comment: 'shared runs in the browser as well.',
      from: { path: '^shared/', pathNot: specs },
      to: { dependencyTypes: ['core'] },
    },
    forbid('units-stand-alone', '^shared/units/', { path: '^shared/', pathNot: '^shared/units/' }),
    forbid('air-needs-units', '^shared/air/', { path: '^shared/', pathNot: '^shared/(air|units)/' }),
    forbid('statistics-needs-units', '^shared/statistics/', {
      path: '^shared/',
      pathNot: '^shared/(statistics|units)/',
    }),
    forbid('cure-needs-the-pure-parts', '^shared/cure/', {
      path: '^shared/',
      pathNot: '^shared/(cure|units|air|statistics)/',
    }),
    forbid('contract-needs-units', '^shared/contract/', {
      path: '^shared/',
      pathNot: '^shared/(contract|units)/',
    }),
    forbid('ends-meet-in-shared-only', '^gateway/', '^(simulator|web|e2e)/'),
    forbid('simulator-stands-alone', '^simulator/', '^(gateway|web|e2e)/'),
    forbid('web-stands-alone', '^web/', '^(gateway|simulator|e2e)/'),
    forbid('e2e-uses-public-interfaces', '^e2e/', '^(gateway|simulator|web)/'),
    forbid('nobody-imports-config', '^(shared|gateway|simulator|web|e2e)/', '^config/'),
    forbid(
      'use-cases-know-no-transport',
      {
        path: '^gateway/features/[^/]+/[^/]+\\.ts$',
        pathNot: `${specs}|-routes\\.ts$|-repository\\.ts$|audit-lines\\.ts$`,
      },
      { path: npm('express', 'socket\\.io', 'mqtt', 'aedes', 'typeorm'), dependencyTypesNot: ['type-only'] },
      'A use case can be run without a web server or a database driver.',
    ),
    forbid('routes-meet-use-cases', { path: '-routes\\.ts$' }, '(-repository|-entity)\\.ts$'),
    forbid(
      'entities-stay-with-repositories',
      {
        path: '^gateway/',
        pathNot: `${specs}|-repository\\.ts$|^gateway/database/|^gateway/(demo|load-demo)`,
      },
      { path: '^gateway/database/entities/', dependencyTypesNot: ['type-only'] },
    ),
    forbid('transports-do-not-meet', '^gateway/intake/', '^gateway/(live|http)/'),
    forbid('live-knows-no-broker', '^gateway/live/', '^gateway/intake/'),
    forbid(
      'only-main-assembles',
      { path: '^gateway/', pathNot: `${specs}|^gateway/(main|assemble[^/]*)\\.ts$` },
      '^gateway/assemble',
    ),
    forbid('features-share-ui-and-core', '^web/app/features/([^/]+)/', {
      path: '^web/app/features/',
      pathNot: '^web/app/features/$1/',
    }),
    forbid('ui-knows-no-core', '^web/app/ui/', '^web/app/(core|features|shell)/'),
    forbid('core-knows-no-features', '^web/app/core/', '^web/app/(features|shell)/'),
    forbid(
      'no-barrels',
      {},
      '^(shared|gateway|simulator|web|e2e)/.*/index\\.ts$',
      'Import the file that has the thing.',
    ),
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '^dist/|^\\.cache/' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'gateway/tsconfig.json' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'require', 'node', 'default', 'types'],
      mainFields: ['module', 'main', 'types'],
      extensions: ['.ts', '.js', '.mjs', '.json'],
    },
  },
};
