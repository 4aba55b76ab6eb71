// The import table of DEVELOPERS.md, as rules. Read it there first: this file only enforces it.
const lib = '^src/lib/';
const server = `${lib}server/`;
const usecases = ['ingest', 'measure', 'review', 'release', 'query', 'accounts', 'programmes'];
const infrastructure = ['database', 'queue', 'auth', 'storage', 'mail', 'identifiers', 'audit', 'config', 'log'];
const science = ['constants', 'cosmology', 'frames', 'simulate', 'measure', 'derive', 'review', 'release'];
const inLib = (...names) => `${lib}(?:${names.join('|')})/`;
const inServer = (names) => `${server}(?:${names.join('|')})/`;
const tests = '\\.test\\.ts$';

/** Project files `from` may reach only project files in `to` (packages are ruled apart). */
const only = (name, from, to) => ({
  name,
  severity: 'error',
  from: { path: from, pathNot: tests },
  to: { path: '^(?:src|worker|tests)/', pathNot: to },
});
/** No Node, Kit or DOM packages. */
const packagesOnly = (name, from, allowed) => ({
  name,
  severity: 'error',
  from: { path: from, pathNot: tests },
  to: {
    path: allowed.length ? '(?:node_modules/)' : 'node_modules/',
    pathNot: allowed.map((p) => `node_modules/${p}/`).join('|') || '^$',
  },
});

/** @type {import('dependency-cruiser').IConfiguration} */
module.exports = {
  forbidden: [
    { name: 'no-cycles', severity: 'error', from: {}, to: { circular: true } },
    {
      name: 'nothing-imports-tests',
      severity: 'error',
      from: { pathNot: `^tests/|${tests}` },
      to: { path: `^tests/|${tests}` },
    },
    {
      name: 'every-import-resolves',
      severity: 'error',
      from: { path: '^(?:src|worker)/' },
      to: { couldNotResolve: true, pathNot: '^\\$(?:app|env)/|^\\./\\$types|^\\$service-worker' },
    },
    only('domain-alone', inLib('domain'), inLib('domain')),
    packagesOnly('domain-packages', inLib('domain'), ['zod']),
    only('api', inLib('api'), inLib('domain', 'api')),
    only('formats', inLib('formats'), inLib('domain', 'api', 'formats')),
    only('adql', inLib('adql'), inLib('domain', 'api', 'adql')),
    ...science.map((name, i) =>
      only(
        `science-${name}`,
        `${lib}science/${name}/`,
        `${lib}(?:domain|science/(?:${science.slice(0, i + 1).join('|')}))/`,
      ),
    ),
    {
      name: 'science-is-pure',
      severity: 'error',
      from: { path: inLib('science'), pathNot: tests },
      to: { dependencyTypes: ['core'] },
    },
    packagesOnly('science-packages', inLib('science'), ['astronomy-engine', 'fft\\.js', 'zod']),
    ...usecases.map((name) =>
      only(
        `use-case-${name}`,
        `${server}${name}/`,
        `${server}(?:${[name, ...infrastructure].join('|')})/|${inLib('domain', 'api', 'formats', 'science', 'adql')}`,
      ),
    ),
    only('infrastructure', inServer(infrastructure), `${inServer(infrastructure)}|${inLib('domain', 'api')}`),
    {
      name: 'only-database-sees-sequelize',
      severity: 'error',
      from: { path: '^(?:src|worker)/', pathNot: `${server}database/|${tests}` },
      to: { path: 'node_modules/(?:sequelize|umzug|mariadb)/' },
    },
    {
      name: 'only-queue-and-worker-see-bullmq',
      severity: 'error',
      from: { path: '^(?:src|worker)/', pathNot: `${server}queue/|^worker/|${tests}` },
      to: { path: 'node_modules/bullmq/' },
    },
    only('worker', '^worker/', `^worker/|${inLib('server', 'science', 'formats', 'domain', 'api')}`),
    only('commands', inLib('commands'), inLib('commands', 'server', 'science', 'formats', 'domain', 'api')),
    only(
      'browser-parts',
      inLib('charts', 'keys', 'ui'),
      inLib('charts', 'keys', 'ui', 'domain', 'api', 'science', 'formats'),
    ),
    only(
      'pages',
      '^src/routes/.*(?:\\.svelte|\\+page\\.ts|\\+layout\\.ts|\\.svelte\\.ts)$',
      `^src/routes/|^src/app\\.css$|${inLib('charts', 'keys', 'ui', 'domain', 'api', 'science')}`,
    ),
    only(
      'server-routes',
      '^src/(?:routes/.*(?:\\.server\\.ts|\\+server\\.ts)|hooks\\.server\\.ts)$',
      `^src/routes/|${inServer([...usecases, 'auth', 'config', 'log'])}|${inLib('domain', 'api')}`,
    ),
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '^\\.svelte-kit|^build' },
    tsConfig: { fileName: 'tsconfig.json' },
    webpackConfig: { fileName: 'tests/architecture/resolve.cjs' },
    tsPreCompilationDeps: true,
    extraExtensionsToScan: [],
    enhancedResolveOptions: { exportsFields: ['exports'], conditionNames: ['svelte', 'import', 'node', 'default'] },
  },
};
