/** The doors between the rooms (see DEVELOPERS.md). Dependencies point one way: routes and worker → server → domain and engine. */
const engineLayers = [
  // Basics are the loose files of the engine's own folder, except its front doors.
  'molecule',
  'forcefield',
  'minimizer',
  'conformers',
  'thermo',
  'torsion',
  'conjugation',
  'strain',
  'tasks',
];
const frontDoors = '^src/lib/engine/(run|index|light)[.]ts$';
const tests = '[.]test[.]ts$';
/** What a browser loads: pages and widgets, but not the parts of a route that only the server runs. */
const browser = '^src/(routes|lib/(components|charts|viewer))/';
const serverParts = '([+](server|(page|layout)[.]server)[.]ts|[.]server[.]ts)$';

/** One rule for each engine room: it may not import a room that stands above it, nor a front door. */
const layerRules = engineLayers.map((layer, position) => ({
  name: `engine-layer-${layer}`,
  comment:
    'Inside the engine the layers go one way, so each can be read and tested without those above it.',
  severity: 'error',
  from: { path: `^src/lib/engine/${layer}/`, pathNot: tests },
  to: {
    path: [
      ...engineLayers.slice(position + 1).map((above) => `^src/lib/engine/${above}/`),
      frontDoors,
    ],
  },
}));

module.exports = {
  forbidden: [
    {
      name: 'no-cycles',
      comment: 'Two files that need each other are one file, or miss a third.',
      severity: 'error',
      from: {},
      to: { circular: true },
    },
    {
      name: 'engine-stands-alone',
      comment:
        'The engine runs in a worker thread, a test or a browser: it imports only itself and openchemlib.',
      severity: 'error',
      from: { path: '^src/lib/engine/', pathNot: tests },
      to: { pathNot: ['^src/lib/engine/', '^node_modules/openchemlib/'] },
    },
    {
      name: 'engine-basics-are-basic',
      comment: 'The loose files of the engine are its ground floor: they import none of its rooms.',
      severity: 'error',
      from: { path: '^src/lib/engine/[^/]+[.]ts$', pathNot: [tests, frontDoors] },
      to: { path: ['^src/lib/engine/[^/]+/', frontDoors] },
    },
    ...layerRules,
    {
      name: 'domain-has-no-server',
      comment: 'Browser, server and worker share the domain, so it knows none of them.',
      severity: 'error',
      from: { path: '^src/lib/domain/', pathNot: tests },
      to: { pathNot: ['^src/lib/domain/', '^src/lib/engine/light[.]ts$', '^node_modules/zod/'] },
    },
    {
      name: 'only-server-touches-the-database',
      comment:
        'SQL and the queue live in one place, where every query asks who wants to know; nobody reaches around it.',
      severity: 'error',
      from: {
        pathNot: ['^src/lib/server/', '^tests/', '^drizzle[.]config[.]ts$', '^node_modules/'],
      },
      to: { path: '^node_modules/(drizzle-orm|postgres|pg-boss)/' },
    },
    {
      name: 'routes-ask-the-nouns',
      comment:
        'A route calls one function of a noun (users, batches …), which checks who asks; tables and connection are none of its business.',
      severity: 'error',
      from: { path: '^src/routes/' },
      to: { path: '^src/lib/server/db/' },
    },
    {
      name: 'browser-loads-only-the-light-engine',
      comment:
        'The force field and openchemlib’s tables are megabytes; pages get the small pure parts through engine/light.ts. Types cost nothing.',
      severity: 'error',
      from: { path: browser, pathNot: [serverParts, tests] },
      to: {
        path: '^src/lib/engine/',
        pathNot: '^src/lib/engine/light[.]ts$',
        dependencyTypesNot: ['type-only'],
      },
    },
    {
      name: 'browser-has-no-server',
      comment: 'What a browser loads must not contain the server; only types may cross.',
      severity: 'error',
      from: { path: browser, pathNot: [serverParts, tests] },
      to: { path: ['^src/lib/server/', '^worker/'], dependencyTypesNot: ['type-only'] },
    },
    {
      name: 'server-only-reads-molecules',
      comment:
        'The web answers in milliseconds, so the server may read and write molecules; whatever computes runs in the worker’s threads.',
      severity: 'error',
      from: { path: '^src/lib/server/', pathNot: tests },
      to: {
        path: '^src/lib/engine/((forcefield|minimizer|conformers|thermo|torsion|conjugation|strain|tasks)/|run[.]ts$)',
        dependencyTypesNot: ['type-only'],
      },
    },
    {
      name: 'server-stands-without-the-web',
      comment:
        'The worker runs the same server code, where there is no SvelteKit application and no page. The charts’ plain arithmetic is shared: a bundle draws the same plots.',
      severity: 'error',
      from: { path: '^(src/lib/server|worker)/' },
      to: {
        path: [
          '^src/(routes|lib/(components|viewer))/',
          '^src/lib/charts/.*[.]svelte$',
          '^src/(auth|hooks[.]server)[.]ts$',
          '^[$](app|env)/',
        ],
      },
    },
    {
      name: 'server-does-not-know-the-worker',
      comment: 'The worker calls the server’s functions; the way back goes through the queue.',
      severity: 'error',
      from: { path: '^src/' },
      to: { path: '^worker/' },
    },
    {
      name: 'programs-stand-alone',
      comment:
        'The room of the external programs turns geometries into numbers: it needs no more than the engine’s types, so it can be tried without database and queue.',
      severity: 'error',
      from: { path: '^worker/programs/', pathNot: tests },
      to: {
        pathNot: ['^worker/programs/', '^src/lib/engine/index[.]ts$'],
        dependencyTypesNot: ['core'],
      },
    },
    {
      name: 'programs-take-only-types-of-the-engine',
      comment: 'Whatever the engine computes is computed in its own threads.',
      severity: 'error',
      from: { path: '^worker/programs/', pathNot: tests },
      to: { path: '^src/', dependencyTypesNot: ['type-only'] },
    },
    {
      name: 'charts-are-arithmetic',
      comment: 'Scales and paths of the charts are plain functions, tested without a page.',
      severity: 'error',
      from: { path: '^src/lib/charts/.*[.]ts$', pathNot: tests },
      to: { path: ['^src/(routes|lib/(components|viewer|server))/', '^node_modules/svelte/'] },
    },
    {
      name: 'nothing-imports-tests',
      comment: 'What ships must not need what checks it.',
      severity: 'error',
      from: { pathNot: ['^tests/', tests] },
      to: { path: ['^tests/', tests] },
    },
    {
      name: 'no-orphan-packages',
      comment: 'A package that is not declared works only by luck.',
      severity: 'error',
      from: {},
      to: { dependencyTypes: ['npm-no-pkg', 'npm-unknown'] },
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    tsPreCompilationDeps: true,
    // It does not follow the paths of the tsconfig that SvelteKit generates.
    tsConfig: { fileName: 'tsconfig.doors.json' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'node', 'default', 'types'],
    },
  },
};
