/** Dependencies point one way: app -> src; measuring -> every stage; a stage -> numerics and the types of the stage before it. */
const stage = (name, allowed) => ({
  name: `${name}-looks-only-back`,
  severity: 'error',
  comment: `src/${name} may use ${allowed.join(', ') || 'nothing of ours'}`,
  from: { path: `^src/${name}/` },
  to: { path: '^(src|app|samples|test)/', pathNot: `^src/(${[name, ...allowed].join('|')})/` },
});

module.exports = {
  forbidden: [
    { name: 'no-circles', severity: 'error', from: {}, to: { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } } },
    { name: 'resolvable', severity: 'error', from: {}, to: { couldNotResolve: true, pathNot: '^(electron|ffmpeg-static)$' } },
    stage('numerics', []),
    stage('recording', ['numerics']),
    stage('tracking', ['numerics', 'recording']),
    stage('oscillation', ['numerics', 'tracking']),
    stage('reduction', ['numerics', 'oscillation']),
    stage('session', ['recording', 'tracking', 'reduction']),
    stage('report', ['numerics', 'recording', 'oscillation', 'reduction', 'session']),
    {
      name: 'pure-stages',
      severity: 'error',
      comment: 'numerics, oscillation and reduction run anywhere: no files, no processes',
      from: { path: '^src/(numerics|oscillation|reduction)/' },
      to: { dependencyTypes: ['core'] },
    },
    { name: 'core-knows-no-app', severity: 'error', from: { path: '^src/' }, to: { path: '^(app|samples|test)/' } },
    {
      name: 'window-knows-contract-only',
      severity: 'error',
      comment: 'the window may use the contract, itself, pure arithmetic, plans of a sweep, and how results are named and drawn',
      from: { path: '^app/window/' },
      to: { path: '^(src|app)/', pathNot: '^(app/window/|app/contract|src/numerics/|src/reduction/|src/report/(plots/|columns|quantities|number-text))', dependencyTypesNot: ['type-only'] },
    },
    { name: 'window-needs-no-node', severity: 'error', from: { path: '^app/window/' }, to: { dependencyTypes: ['core'] } },
    {
      name: 'only-the-shell-knows-electron',
      severity: 'error',
      from: { path: '^(src|samples|app/(host|window|loopback))/' },
      to: { path: '^electron$|node_modules/electron/' },
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    tsConfig: { fileName: 'tsconfig.json' },
    tsPreCompilationDeps: 'specify',
    enhancedResolveOptions: { exportsFields: ['exports'], extensions: ['.ts', '.tsx', '.js'], conditionNames: ['import', 'require', 'node', 'default', 'types'] },
  },
};
