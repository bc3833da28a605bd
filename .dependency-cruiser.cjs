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
    tsConfig: { fileName: 'tsconfig.json' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'node', 'default', 'types'],
    },
  },
};
