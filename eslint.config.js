import eslint from '@eslint/js';
import tseslint from 'typescript-eslint';

export default tseslint.config(
  { ignores: ['dist/', 'node_modules/', 'coverage/', 'dossier-*/'] },
  eslint.configs.recommended,
  {
    files: ['**/*.ts'],
    extends: [...tseslint.configs.strictTypeChecked],
    languageOptions: {
      parserOptions: { project: ['./test/tsconfig.json'], tsconfigRootDir: import.meta.dirname },
    },
    rules: {
      // Indexing typed arrays in numerical loops needs `!` under noUncheckedIndexedAccess.
      '@typescript-eslint/no-non-null-assertion': 'off',
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true }],
      '@typescript-eslint/no-unnecessary-condition': ['error', { allowConstantLoopConditions: true }],
      'no-control-regex': 'off',
    },
  },
  {
    // Only the command-line layer may know the process and the console.
    files: ['src/**/*.ts'],
    ignores: ['src/cli/**'],
    rules: { 'no-console': 'error', 'no-restricted-globals': ['error', 'process'] },
  },
  { files: ['bin/*.js'], languageOptions: { globals: { process: 'readonly' } } },
);
