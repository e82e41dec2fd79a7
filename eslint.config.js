import tseslint from 'typescript-eslint';

// The core is pure: it may name nothing of the page, of Node or of a drawing library.
const outsideTheCore = [
  'node:*',
  'fs',
  'path',
  'os',
  'child_process',
  'worker_threads',
  'electron',
  'pixi.js',
  'pixi.js/*',
];
const hostGlobals = [
  'window',
  'document',
  'navigator',
  'process',
  'Buffer',
  'require',
  'setTimeout',
  'setInterval',
  'setImmediate',
  'performance',
  'fetch',
  'console',
  '__dirname',
];

export default tseslint.config(
  { ignores: ['dist/', 'node_modules/', 'coverage/'] },
  ...tseslint.configs.strictTypeChecked,
  ...tseslint.configs.stylisticTypeChecked,
  {
    languageOptions: {
      parserOptions: {
        projectService: { allowDefaultProject: ['eslint.config.js'] },
        tsconfigRootDir: import.meta.dirname,
      },
    },
    rules: {
      // A kernel indexes typed arrays inside their bounds; the assertion says so where the compiler cannot see it.
      '@typescript-eslint/no-non-null-assertion': 'off',
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true }],
      '@typescript-eslint/switch-exhaustiveness-check': ['error', { considerDefaultExhaustiveForUnions: true }],
      '@typescript-eslint/no-confusing-void-expression': ['error', { ignoreArrowShorthand: true }],
      '@typescript-eslint/prefer-for-of': 'off',
      eqeqeq: 'error',
    },
  },
  {
    files: ['core/**/*.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        {
          patterns: outsideTheCore.map((group) => ({
            group: [group],
            message: 'core/ is pure: no page, Node, drawing library or Electron.',
          })),
        },
      ],
      'no-restricted-globals': [
        'error',
        ...hostGlobals.map((name) => ({ name, message: 'core/ is pure: no page, Node or clock.' })),
      ],
    },
  },
  { files: ['**/*.js', '**/*.mjs'], ...tseslint.configs.disableTypeChecked },
);
