/** Arrows between the rooms of src/: each may import only from those listed beside it. Enforced by test/architecture. */
const ROOMS = {
  expression: [],
  rigorous: ['expression'],
  functions: ['expression', 'rigorous'],
  algebra: ['expression', 'rigorous', 'functions'],
  series: ['expression', 'rigorous', 'functions', 'algebra'],
  expand: ['expression', 'rigorous', 'functions', 'algebra', 'series'],
  bound: ['expression', 'rigorous', 'functions', 'algebra', 'series', 'expand'],
  fit: ['expression', 'rigorous', 'functions', 'algebra', 'series', 'expand', 'bound', 'write'],
  guard: ['expression', 'rigorous', 'functions', 'algebra', 'series', 'expand', 'bound', 'fit', 'write'],
  read: ['expression', 'functions'],
  write: ['expression', 'functions', 'expand'],
  check: ['expression', 'rigorous', 'functions', 'algebra', 'series', 'expand', 'bound', 'fit', 'guard', 'read', 'write'],
  engine: ['expression', 'rigorous', 'functions', 'algebra', 'series', 'expand', 'bound', 'fit', 'guard', 'read', 'write', 'check'],
};
const anywhere = '^src/(protocol|outcome|companions)\\.ts$';
module.exports = {
  forbidden: [
    { name: 'no-circles', severity: 'error', from: {}, to: { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } } },
    { name: 'vscode-only-in-editor', severity: 'error', from: { pathNot: '^(src/editor/|test/)' }, to: { path: '^vscode$|node_modules/@types/vscode' } },
    ...Object.entries(ROOMS).map(([room, allowed]) => ({
      name: `${room}-arrows`,
      severity: 'error',
      from: { path: `^src/${room}/` },
      to: { path: '^src/', pathNot: [`^src/(${[room, ...allowed].join('|')})/`, anywhere] },
    })),
    {
      name: 'hosts-see-only-the-door',
      severity: 'error',
      from: { path: '^src/(editor|cli|webview)/' },
      to: { path: '^src/', pathNot: ['^src/(editor|cli|webview|worker)/', '^src/engine\\.ts$', anywhere] },
    },
    { name: 'through-the-door', severity: 'error', from: { path: '^src/([^/]+)/' }, to: { path: '^src/([^/]+)/.+', pathNot: ['^src/$1/', '^src/[^/]+/(index|description|expansion|types)\\.ts$', '^src/worker/', '^src/webview/(messages|words|figures)\\.ts$'] } },
  ],
  options: { tsPreCompilationDeps: true, doNotFollow: { path: 'node_modules' }, tsConfig: { fileName: 'tsconfig.json' }, exclude: { path: '\\.mjs$' } },
};
