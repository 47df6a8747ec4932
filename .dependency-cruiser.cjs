const rooms = {
  arrays: [],
  linalg: ['arrays'],
  study: ['arrays'],
  results: [],
  forecast: ['arrays', 'linalg', 'study', 'results'],
  output: ['study'],
  figures: ['results'],
  report: ['results', 'figures', 'output'],
};

module.exports = {
  forbidden: [
    { name: 'no-cycles', severity: 'error', from: {}, to: { circular: true } },
    ...Object.entries(rooms).map(([room, allowed]) => ({
      name: `${room}-imports-only-${allowed.join('-') || 'itself'}`,
      severity: 'error',
      from: { path: `^src/${room}/` },
      to: { path: '^src/', pathNot: `^src/(${[room, ...allowed].join('|')})/` },
    })),
    {
      name: 'the-core-is-pure',
      comment: 'Reading, writing, clocks and terminals stay at the edge.',
      severity: 'error',
      from: { path: '^src/(forecast|linalg)/' },
      to: { dependencyTypes: ['core'] },
    },
  ],
  options: { tsPreCompilationDeps: true, tsConfig: { fileName: 'tsconfig.json' }, doNotFollow: { path: 'node_modules' } },
};
