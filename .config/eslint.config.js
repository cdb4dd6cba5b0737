import js from '@eslint/js';
import pluginVue from 'eslint-plugin-vue';
import globals from 'globals';
import tseslint from 'typescript-eslint';

/** One-way imports (DEVELOPERS.md, "Map"): each entry says what a folder may not reach. */
const mayNotImport = (files, groups, message) => ({
  files,
  rules: {
    'no-restricted-imports': ['error', { patterns: groups.map((group) => ({ group: [group].flat(), message })) }],
  },
});
/** Functions whose last digits are the engine's own affair: phone and server would print different numbers. */
const ENGINE_OWN =
  'sin cos tan asin acos atan atan2 exp expm1 log log1p log10 log2 pow hypot cbrt sinh cosh tanh random'
    .split(' ')
    .map((property) => ({ object: 'Math', property, message: 'Use physics/elementary or statistics/hypot.' }));
const SRC = ['@/**', '**/src/**'];
const SERVER = ['**/server/**'];
const within = (folder) => [`@/${folder}/**`, `../${folder}/**`, `../../${folder}/**`];
const SERVER_ROUTES = ['**/routes/**'];
const DEXIE = ['dexie', 'dexie/*'];

export default tseslint.config(
  { ignores: ['dist/', 'data/', 'node_modules/', 'coverage/', 'public/', 'tests/reference/'] },
  js.configs.recommended,
  ...tseslint.configs.strict,
  ...pluginVue.configs['flat/recommended'],
  {
    languageOptions: { globals: { ...globals.browser, ...globals.node, __APP_VERSION__: 'readonly' } },
    rules: {
      'no-console': 'error',
      'max-lines': ['warn', { max: 400, skipBlankLines: true, skipComments: true }],
      '@typescript-eslint/no-non-null-assertion': 'off',
      '@typescript-eslint/consistent-type-imports': 'error',
      'vue/multi-word-component-names': 'off',
      'vue/max-attributes-per-line': 'off',
      'vue/singleline-html-element-content-newline': 'off',
      'vue/html-self-closing': 'off',
      'vue/html-indent': 'off',
      'vue/html-closing-bracket-newline': 'off',
      'vue/multiline-html-element-content-newline': 'off',
      'vue/first-attribute-linebreak': 'off',
      'vue/attributes-order': 'off',
      'vue/block-order': ['error', { order: ['script', 'template', 'style'] }],
      'no-restricted-globals': ['error', { name: 'fetch', message: 'api/ alone calls fetch.' }],
    },
  },
  { files: ['**/*.vue'], languageOptions: { parserOptions: { parser: tseslint.parser } } },
  { files: ['src/api/**', 'tests/**', 'server/**'], rules: { 'no-restricted-globals': 'off' } },
  { files: ['server/cli/**', 'tests/bench/**', 'tests/support/**', '**/*.mjs'], rules: { 'no-console': 'off' } },
  mayNotImport(
    ['shared/**'],
    [SRC, SERVER, 'vue', 'dexie', 'node:*', 'express', 'pinia', 'quasar'],
    'shared imports nothing of ours, no Vue, Node or DOM.',
  ),
  {
    files: ['shared/**'],
    ignores: ['shared/physics/elementary.ts'],
    rules: {
      'no-restricted-properties': ['error', ...ENGINE_OWN],
      'no-restricted-syntax': [
        'error',
        {
          selector: "BinaryExpression[operator='**']:not([right.value=2]):not([left.value=10])",
          message: 'Engines differ here: use pow of physics/elementary.',
        },
      ],
    },
  },
  mayNotImport(
    ['src/pages/**', 'src/layouts/**'],
    [SERVER, within('db'), within('api'), within('sync'), DEXIE],
    'pages and layouts use components, stores and composables.',
  ),
  mayNotImport(
    ['src/components/**'],
    [SERVER, within('pages'), within('layouts'), within('db'), within('api'), within('sync'), DEXIE],
    'components use stores and composables.',
  ),
  mayNotImport(
    ['src/stores/**', 'src/composables/**'],
    [SERVER, within('pages'), within('layouts'), within('components'), DEXIE],
    'stores and composables use db, api and sync; db alone imports Dexie.',
  ),
  mayNotImport(
    ['src/sync/**'],
    [SERVER, within('pages'), within('components'), within('stores'), within('composables'), DEXIE],
    'sync uses db and api.',
  ),
  mayNotImport(
    ['src/api/**'],
    [
      SERVER,
      within('pages'),
      within('components'),
      within('stores'),
      within('composables'),
      within('db'),
      within('sync'),
      DEXIE,
    ],
    'api talks to the server and knows nothing else.',
  ),
  mayNotImport(
    ['src/db/**'],
    [
      SERVER,
      within('pages'),
      within('components'),
      within('stores'),
      within('composables'),
      within('api'),
      within('sync'),
    ],
    'db keeps data and knows nothing else.',
  ),
  mayNotImport(['server/**'], [SRC], 'server never imports src.'),
  mayNotImport(
    ['server/services/**', 'server/models/**', 'server/policies/**', 'server/presenters/**'],
    [SRC, SERVER_ROUTES],
    'nothing imports routes.',
  ),
  mayNotImport(['server/models/**'], [SRC, SERVER_ROUTES, '**/services/**'], 'models know no services.'),
);
