import js from '@eslint/js';
import reactHooks from 'eslint-plugin-react-hooks';
import reactRefresh from 'eslint-plugin-react-refresh';
import globals from 'globals';
import tseslint from 'typescript-eslint';

/** The import table: what each room may not reach. Patterns are regexes over the import text. */
const mayNotImport = (files, rules) => ({
  files,
  rules: {
    'no-restricted-imports': [
      'error',
      { patterns: rules.map(([regex, message]) => ({ regex, message })) },
    ],
  },
});

export default tseslint.config(
  { ignores: ['dist', 'data', 'node_modules', 'coverage', 'workers/simd', 'workers/kernels/dense/simd-binary.ts'] },
  js.configs.recommended,
  ...tseslint.configs.recommendedTypeChecked,
  {
    languageOptions: {
      parserOptions: {
        projectService: { allowDefaultProject: ['*.js'] },
        tsconfigRootDir: import.meta.dirname,
      },
      globals: { ...globals.node },
    },
    rules: {
      '@typescript-eslint/consistent-type-assertions': ['error', { assertionStyle: 'never' }],
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true, allowBoolean: true, allowNullish: true }],
      eqeqeq: ['error', 'always'],
    },
  },
  {
    files: ['src/**/*.{ts,tsx}'],
    languageOptions: { globals: { ...globals.browser } },
    plugins: { 'react-hooks': reactHooks, 'react-refresh': reactRefresh },
    rules: {
      ...reactHooks.configs.recommended.rules,
      'react-hooks/incompatible-library': 'off',
      'react-refresh/only-export-components': 'off',
    },
  },
  {
    files: ['tests/**/*.{ts,tsx}', 'eslint.config.js'],
    rules: {
      '@typescript-eslint/no-unsafe-assignment': 'off',
      '@typescript-eslint/no-unsafe-member-access': 'off',
      '@typescript-eslint/no-unsafe-argument': 'off',
      '@typescript-eslint/no-unsafe-call': 'off',
      '@typescript-eslint/no-unsafe-return': 'off',
      '@typescript-eslint/consistent-type-assertions': 'off',
    },
  },
  mayNotImport(['workers/kernels/**'], [
    ['^(node:|#(?!kernels/)|zod|express|knex|piscina)', 'kernels are pure: kernels and numeric libraries only'],
  ]),
  mayNotImport(['workers/tasks/**', 'workers/task.ts'], [
    ['^(#src/|#server/(?!db/column-store|lib/)|piscina|express|knex)', 'tasks read columns and order kernels'],
  ]),
  mayNotImport(['server/contract/**'], [
    ['^(?!zod$|\\./|#contract/)', 'the contract imports zod and itself'],
  ]),
  mayNotImport(['server/modules/**', 'server/lib/**', 'server/db/**'], [
    ['^(#src/|#tests/|piscina|#workers/(?!client|task-types|tasks/|frame/snapshot-tables|intake/column-plan))', 'the server reaches the workers through workers/client.ts and task types'],
  ]),
  mayNotImport(['src/components/**', 'src/lib/**'], [
    ['^(#src/(features|app)/|#server/|#workers/|#seeds/)', 'components and lib know neither features nor the server'],
  ]),
  mayNotImport(['src/features/**'], [
    ['^(#src/app/|#server/|#workers/|#seeds/)', 'features know components, lib, contract and kernels'],
    ['^#src/features/|^(\\.\\./){2,}', 'a feature never reaches into another feature'],
  ]),
  mayNotImport(['migrations/**'], [['^(?!knex$)', 'migrations import knex only']]),
);
