/** The rooms of src/, from top to bottom. A room imports only rooms below it. */
const rooms = [
  'commands',
  'page',
  'charts',
  'record',
  'explain',
  'decision',
  'assumptions',
  'advice',
  'backtest',
  'outlook',
  'sarima',
  'stats',
  'plan',
  'figures',
  'calendar',
];

const room = (names) => `^src/(${[names].flat().join('|')})/`;
const siblings = ['explain', 'decision', 'assumptions', 'advice'];
const numerical = rooms.slice(rooms.indexOf('record') + 1, rooms.indexOf('plan'));

const notUpward = rooms.slice(1).map((name, i) => ({
  name: `${name}-imports-only-what-stands-below`,
  severity: 'error',
  from: { path: room(name) },
  to: { path: [room(rooms.slice(0, i + 1)), '^src/(index|cli)\\.ts$'] },
}));

module.exports = {
  forbidden: [
    { name: 'no-circles', severity: 'error', from: {}, to: { circular: true } },
    { name: 'no-unresolvable', severity: 'error', from: {}, to: { couldNotResolve: true } },
    ...notUpward,
    ...siblings.map((name) => ({
      name: `${name}-imports-no-sibling`,
      severity: 'error',
      from: { path: room(name) },
      to: { path: room(siblings.filter((other) => other !== name)) },
    })),
    {
      name: 'numbers-know-neither-plan-nor-figures',
      severity: 'error',
      from: { path: room(numerical) },
      to: { path: room(['plan', 'figures']) },
    },
    {
      name: 'charts-see-record-types-and-calendar',
      severity: 'error',
      from: { path: room('charts') },
      to: { path: '^src/', pathNot: ['^src/charts/', '^src/calendar/', '^src/record/(record|cover|choice)\\.ts$'] },
    },
    {
      name: 'pages-see-record-types-calendar-and-charts',
      severity: 'error',
      from: { path: room('page') },
      to: { path: '^src/', pathNot: ['^src/(page|charts|calendar)/', '^src/record/(record|cover|choice)\\.ts$'] },
    },
    {
      name: 'entry-points-are-not-imported',
      severity: 'error',
      from: { path: '^src/[a-z]+/' },
      to: { path: '^src/(index|cli)\\.ts$' },
    },
    {
      name: 'numbers-touch-no-files',
      severity: 'error',
      from: { path: room([...numerical, 'calendar']) },
      to: { dependencyTypes: ['core'] },
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    tsConfig: { fileName: 'tsconfig.json' },
    tsPreCompilationDeps: true,
    enhancedResolveOptions: { exportsFields: ['exports'], conditionNames: ['import', 'node', 'default', 'types'] },
    exclude: { path: '^(dist|test)/' },
  },
};
