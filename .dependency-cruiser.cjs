/** Which folder may use which. Read each as: nothing in `from` imports anything in `to`. */
const error = (name, comment, from, to) => ({ name, comment, severity: 'error', from, to });
const tests = '\\.(spec|test)\\.tsx?$|^[^/]+/(test|e2e|bench)/|/testing/';

module.exports = {
  forbidden: [
    error('shared-is-a-leaf', 'shared knows nobody', { path: '^shared/' }, { path: '^(api|portal|mocks)/' }),
    error('shared-is-pure', 'shared needs zod and published data, nothing else; no input or output',
      { path: '^shared/src/', pathNot: tests },
      { dependencyTypes: ['npm', 'npm-dev', 'npm-optional', 'npm-peer', 'npm-no-pkg', 'core'], pathNot: 'node_modules/(zod|@18f/us-federal-holidays)/' }),
    error('portal-not-api', 'the portal speaks to the API over HTTP only', { path: '^portal/' , pathNot: '^portal/e2e/' }, { path: '^(api|mocks)/' }),
    error('api-not-portal', 'the API does not know its pages', { path: '^api/' }, { path: '^portal/' }),
    error('no-mocks-in-the-product', 'stand-ins serve the launcher and tests', { path: '^(api|portal|shared)/src/', pathNot: tests }, { path: '^mocks/' }),
    error('stand-ins-stand-alone', 'a stand-in that shares code with the API would share its mistakes', { path: '^mocks/(stripe|mail|storage)/' }, { path: '^(api|portal|shared)/' }),
    error('no-tests-in-the-product', 'what runs does not import tests', { path: '^[^/]+/src/', pathNot: tests }, { path: tests }),
    error('features-apart', 'features of the portal never import each other; app composes them',
      { path: '^portal/src/features/([^/]+)/' }, { path: '^portal/src/features/', pathNot: '^portal/src/features/$1/' }),
    error('features-below-app', 'features do not know the app that composes them', { path: '^portal/src/features/' }, { path: '^portal/src/app/' }),
    error('ui-below-features', 'what several features use knows none of them', { path: '^portal/src/(ui|lib)/' }, { path: '^portal/src/(features|app)/' }),
    error('lib-below-ui', 'lib draws nothing', { path: '^portal/src/lib/' }, { path: '^portal/src/ui/' }),
    error('no-cycles', 'a cycle has no order to be read in', {}, { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } }),
    error('resolvable', 'every import leads somewhere', { pathNot: '\\.(cjs|mjs)$' }, { couldNotResolve: true }),
    // @jest/globals is jest's own, in the same version
    error('declared', 'a package is named in its own workspace', { path: '^(api|portal|shared|mocks)/' }, { dependencyTypes: ['npm-no-pkg', 'npm-unknown'], pathNot: 'node_modules/@jest/globals/' }),
    error('no-tools-in-the-product', 'what runs does not need a development package',
      { path: '^(api|shared)/src/', pathNot: tests }, { dependencyTypes: ['npm-dev'], dependencyTypesNot: ['type-only'] }),
  ],
  options: {
    doNotFollow: { path: 'node_modules|(^|/)dist/' },
    exclude: { path: '(^|/)(dist|coverage)/' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.base.json' },
    enhancedResolveOptions: {
      conditionNames: ['source', 'import', 'node', 'default', 'types'],
      exportsFields: ['exports'],
      extensions: ['.ts', '.tsx', '.js', '.mjs', '.cjs', '.d.ts', '.json', '.css'],
    },
  },
};
