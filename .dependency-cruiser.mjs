/*
 * The layers, as rules. Data flows one way, from an export to a sentence; a rule that breaks says what to do instead.
 */
const only = (from, allowed, comment) => ({
  name: `${from}-imports`,
  severity: 'error',
  comment,
  from: { path: `^src/${from}/` },
  to: {
    path: '^src/',
    pathNot: [
      `^src/${from}/`,
      '^src/(errors|days)\\.ts$',
      ...allowed.map((place) => `^src/${place}${place.endsWith('.ts') ? '$' : '/'}`),
    ],
  },
});

const packageOnly = (name, path, folders, comment) => ({
  name,
  severity: 'error',
  comment,
  from: { path: '^src/', pathNot: folders.map((folder) => `^src/${folder}`) },
  to: { path },
});

export default {
  forbidden: [
    {
      name: 'no-cycles',
      severity: 'error',
      comment: 'Two files need each other: move what both need into a third that imports neither.',
      from: { path: '^src/' },
      to: { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } },
    },
    {
      name: 'charts-imports',
      severity: 'error',
      comment: 'Charts are pure statistics: hand them numbers, and keep dates, files and words outside.',
      from: { path: '^src/charts/' },
      to: { path: '^src/', pathNot: '^src/charts/' },
    },
    only('accounts', ['charts/types\\.ts'], 'Reading an export knows nothing of what is counted from it.'),
    only('census', ['accounts'], 'The census turns accounts into subgroups and stops there.'),
    only('verdict', ['charts', 'census', 'accounts/types\\.ts'], 'A verdict is made from a chart and a census.'),
    only('picture', ['charts', 'verdict'], 'The picture is handed finished numbers.'),
    only(
      'requests',
      ['census', 'accounts/types\\.ts', 'charts/types\\.ts'],
      'The grammar fills request types and runs nothing.',
    ),
    only(
      'store',
      ['accounts/types\\.ts', 'requests/types\\.ts', 'census/types\\.ts'],
      'The store keeps things; it computes none.',
    ),
    only(
      'answers',
      ['accounts', 'census', 'charts', 'verdict', 'picture', 'requests', 'store'],
      'Answers are where the parts meet; they know no chat service.',
    ),
    only(
      'channel',
      [
        'answers',
        'requests',
        'store/types\\.ts',
        'accounts/(types|checkAsOf)\\.ts',
        'census/tenure\\.ts',
        'verdict/types\\.ts',
        'verdict/words',
        'picture/picture\\.ts',
      ],
      'The channel translates, calls one answer and formats the reply: no statistics, no SQL.',
    ),
    only('practice', [], 'The practice service stands in for somebody else: it knows nothing of ours.'),
    only(
      'cli',
      ['answers', 'requests', 'accounts', 'census', 'verdict', 'picture/picture\\.ts', 'charts/types\\.ts'],
      'The command line calls answers.',
    ),
    packageOnly(
      'bolt-only-in-channel',
      '^node_modules/@slack/(bolt|web-api|socket-mode|oauth)',
      ['channel/', 'main\\.ts'],
      'Bolt stays in src/channel.',
    ),
    packageOnly(
      'sql-engine-only',
      '^node_modules/@duckdb/',
      ['accounts/', 'census/'],
      'The counting engine stays in accounts and census.',
    ),
    packageOnly(
      'store-engines-only',
      '^node_modules/(pg|pg-boss|@electric-sql)(/|$)',
      ['store/'],
      'Databases stay in src/store.',
    ),
    {
      name: 'not-to-test',
      severity: 'error',
      comment: 'What runs must not need what tests it.',
      from: { path: '^src/' },
      to: { path: '^(test|fixtures)/' },
    },
    {
      name: 'not-to-dev-dependencies',
      severity: 'error',
      comment: 'What runs must be a dependency, not a devDependency.',
      from: { path: '^src/', pathNot: '^src/practice/page/' },
      to: {
        dependencyTypes: ['npm-dev'],
        dependencyTypesNot: ['npm', 'type-only'],
        pathNot: '^node_modules/@(slack|types)/',
      },
    },
    {
      name: 'no-orphans',
      severity: 'error',
      comment: 'Nothing imports this file: delete it or use it.',
      from: {
        orphan: true,
        path: '^src/',
        pathNot: ['\\.d\\.ts$', '^src/practice/page/', '^src/main\\.ts$', '^src/cli/ebb\\.ts$'],
      },
      to: {},
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.json' },
    enhancedResolveOptions: { extensions: ['.ts', '.tsx', '.js'] },
  },
};
