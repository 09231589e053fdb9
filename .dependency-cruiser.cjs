/**
 * Who may import whom. The measurement knows nothing of the app, the app reaches data only through lib/server,
 * and only lib/server (and the scripts that run beside it) knows the tables.
 */
const only = (name, from, allowed, comment) => ({
  name,
  comment,
  severity: 'error',
  from: { path: from },
  to: { pathNot: [from, ...allowed], path: '^(app|components|lib|models|migrations|scripts|tests)/' },
});

const noPackagesBut = (name, from, packages) => ({
  name,
  severity: 'error',
  from: { path: from.path, pathNot: from.pathNot },
  to: { path: 'node_modules/', pathNot: packages.map((p) => `node_modules/(@types/)?${p}/`) },
});

module.exports = {
  forbidden: [
    { name: 'no-cycles', severity: 'error', from: {}, to: { circular: true } },
    { name: 'no-missing', severity: 'error', from: {}, to: { couldNotResolve: true, pathNot: '\\.css$' } },
    only('imaging', '^lib/imaging/', ['^lib/domain/'], 'Imaging is plain arithmetic on pictures.'),
    only('fit', '^lib/fit/', ['^lib/domain/'], 'The fit knows no pictures.'),
    only('quantity', '^lib/quantity/', ['^lib/domain/'], 'Quantities know domain types only.'),
    only(
      'statistics',
      '^lib/statistics/',
      ['^lib/domain/', '^lib/quantity/'],
      'Statistics know quantities only.',
    ),
    only('domain', '^lib/domain/', ['^lib/quantity/'], 'The domain is words and types.'),
    only(
      'measure',
      '^lib/measure/',
      ['^lib/(imaging|fit|quantity|domain)/'],
      'measure = imaging + fit + quantity.',
    ),
    only(
      'client',
      '^lib/client/',
      ['^lib/(measure|quantity|domain)/', '^app/.*actions\\.ts$'],
      'Browser glue never reaches the server.',
    ),
    only('models', '^models/', ['^lib/domain/'], 'Models hold no policy.'),
    only('migrations', '^migrations/', [], 'A migration is frozen: it may not change when code does.'),
    only(
      'server',
      '^lib/server/',
      ['^models/', '^lib/(measure|quantity|statistics|domain)/'],
      'The one door to data.',
    ),
    only('components-ui', '^components/ui/', ['^lib/client/'], 'ui has no domain words.'),
    only(
      'components',
      '^components/',
      ['^lib/(domain|quantity|client|statistics)/'],
      'Components never reach server or models.',
    ),
    {
      name: 'app-no-models',
      severity: 'error',
      from: { path: '^app/' },
      to: { path: '^(models|migrations|scripts|tests)/' },
    },
    noPackagesBut('packages-of-imaging', { path: '^lib/imaging/', pathNot: 'decode\\.ts$' }, [
      'fft\\.js',
      'ml-[^/]+',
    ]),
    noPackagesBut('packages-of-decode', { path: '^lib/imaging/decode\\.ts$' }, ['sharp', 'fft\\.js', 'node']),
    noPackagesBut('packages-of-numbers', { path: '^lib/(fit|quantity|statistics)/' }, [
      'fft\\.js',
      'ml-[^/]+',
    ]),
    noPackagesBut('packages-of-models', { path: '^models/' }, ['sequelize']),
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '(^|/)(\\.next[^/]*|\\.build|\\.data|\\.test-data)/|next-env\\.d\\.ts' },
    tsConfig: { fileName: 'tsconfig.json' },
    tsPreCompilationDeps: true,
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'require', 'node', 'default', 'types'],
    },
  },
};
