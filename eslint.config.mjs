import js from '@eslint/js';
import astro from 'eslint-plugin-astro';
import tseslint from 'typescript-eslint';

const typed = ['**/*.ts', '**/*.tsx'];

export default tseslint.config(
  { ignores: ['.build/**', '.data/**', '.shots/**', '.bench/**', '.test/**', '.astro/**', 'drizzle/**'] },
  js.configs.recommended,
  ...tseslint.configs.strict,
  ...astro.configs['flat/recommended'],
  {
    files: typed,
    extends: [tseslint.configs.strictTypeChecked],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: {
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true }],
      '@typescript-eslint/no-confusing-void-expression': 'off',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
      '@typescript-eslint/switch-exhaustiveness-check': 'error',
    },
  },
  {
    rules: {
      eqeqeq: 'error',
      'max-lines': ['error', 400],
      'no-console': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
      'no-restricted-syntax': [
        'error',
        {
          selector: "MemberExpression[object.name='process'][property.name='env']",
          message: 'Settings are read by env() of ~/server/env.',
        },
      ],
    },
  },
  {
    // What starts before the settings exist, or makes them.
    files: [
      'src/server/env.ts',
      'src/server/log.ts',
      'src/server/run/**',
      'tests/**',
      'local-fakes/**',
      '*.config.*',
    ],
    rules: { 'no-restricted-syntax': 'off' },
  },
  {
    files: ['**/*.mjs', '*.config.*'],
    languageOptions: {
      globals: Object.fromEntries(
        ['process', 'setTimeout', 'URL', 'Buffer'].map((name) => [name, 'readonly']),
      ),
    },
  },
  { files: ['tests/setup/console-guard.ts'], rules: { 'no-console': 'off' } },
);
