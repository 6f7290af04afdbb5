// The import rules of DEVELOPERS.md, all at error level.
const order = [
  'units',
  'fitting',
  'molecule',
  'spectrum',
  'lines',
  'assignment',
  'reference',
  'marking',
  'tables',
  'contract',
];
const error = (name, from, to) => ({ name, severity: 'error', from, to });

/** Each core folder sees only those above it in the list. */
const layers = order.map((folder, i) =>
  error(
    `core-layer-${folder}`,
    { path: `^shared-core/${folder}/` },
    { path: `^shared-core/(${order.slice(i + 1).join('|') || 'none'})/` },
  ),
);
/** npm packages that a core folder may use. */
const packages = {
  fitting: ['ml-levenberg-marquardt', 'ml-matrix'],
  tables: ['csv-parse', 'csv-stringify', 'read-excel-file', 'fflate'],
  contract: ['zod'],
  marking: ['zod'],
};
const corePackages = order.map((folder) =>
  error(
    `core-packages-${folder}`,
    { path: `^shared-core/${folder}/` },
    {
      path: 'node_modules/',
      pathNot: (packages[folder] ?? []).map((p) => `node_modules/${p}/`).concat('^$'),
    },
  ),
);

export default {
  forbidden: [
    error('no-cycles', {}, { circular: true }),
    error('core-imports-itself-only', { path: '^shared-core/' }, { path: '^(electron|renderer|tests)/' }),
    error('core-no-builtins', { path: '^shared-core/' }, { dependencyTypes: ['core'] }),
    ...layers,
    ...corePackages,
    error('renderer-sees-core-only', { path: '^renderer/' }, { path: '^(electron|tests)/' }),
    error('renderer-no-builtins', { path: '^renderer/' }, { dependencyTypes: ['core'] }),
    error(
      'backend-never-sees-hosts',
      { path: '^electron/backend/' },
      { path: '^electron/hosts/|node_modules/electron/' },
    ),
    error(
      'electron-only-in-entry-files',
      { pathNot: '^electron/hosts/electron-[a-z-]+\\.ts$|^tests/' },
      { path: 'node_modules/electron/' },
    ),
    error('electron-never-sees-renderer', { path: '^electron/' }, { path: '^renderer/|^tests/' }),
    error(
      'sqlite-only-in-store',
      { pathNot: '^electron/backend/store/|^tests/store/|^tests/helpers/' },
      { path: 'node_modules/(better-sqlite3|@types/better-sqlite3)/' },
    ),
    error(
      'workers-never-reach-store',
      { path: '^electron/backend/jobs/' },
      { path: '^electron/backend/store/' },
    ),
    error(
      'chart-js-only-in-charts',
      { pathNot: '^renderer/charts/' },
      { path: 'node_modules/(chart\\.js|chartjs-plugin-zoom)/' },
    ),
    error(
      'example-shares-only-constants',
      { path: '^electron/backend/example/' },
      { path: '^shared-core/', pathNot: '^shared-core/(molecule|units)/' },
    ),
    error('no-unresolvable', {}, { couldNotResolve: true }),
  ],
  options: {
    tsPreCompilationDeps: true,
    doNotFollow: { path: 'node_modules' },
    tsConfig: { fileName: 'tests/tsconfig.json' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      extensions: ['.ts', '.mjs', '.js', '.vue', '.json'],
      conditionNames: ['import', 'require', 'node', 'default', 'types'],
      mainFields: ['module', 'main', 'types'],
    },
  },
};
