import svelte from 'eslint-plugin-svelte';
import ts from 'typescript-eslint';

export default ts.config(
  { ignores: ['node_modules/', '.svelte-kit/', 'build/', 'data/', 'tests/reference/data/', 'test-results/'] },
  ...ts.configs.recommended,
  ...svelte.configs.recommended,
  { files: ['**/*.svelte', '**/*.svelte.ts'], languageOptions: { parserOptions: { parser: ts.parser } } },
  { files: ['**/*.cjs'], rules: { '@typescript-eslint/no-require-imports': 'off' } },
  {
    rules: {
      'no-console': 'error',
      eqeqeq: ['error', 'always'],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      // Links come from our own routes, which have no base path.
      'svelte/no-navigation-without-resolve': 'off',
    },
  },
  { files: ['**/*.mjs', 'src/lib/commands/**', 'tests/**'], rules: { 'no-console': 'off' } },
);
