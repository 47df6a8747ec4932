import tseslint from 'typescript-eslint';

export default tseslint.config(
  { ignores: ['dist/', '.build/', 'node_modules/', 'example-runs/*/report/', 'eslint.config.js', '.dependency-cruiser.cjs'] },
  ...tseslint.configs.strictTypeChecked,
  ...tseslint.configs.stylisticTypeChecked,
  {
    languageOptions: { parserOptions: { project: './tsconfig.json', tsconfigRootDir: import.meta.dirname } },
    rules: {
      // Indices are checked by the loops around them; noUncheckedIndexedAccess makes each of these visible.
      '@typescript-eslint/no-non-null-assertion': 'off',
      '@typescript-eslint/strict-boolean-expressions': [
        'error',
        { allowString: false, allowNumber: false, allowNullableObject: false },
      ],
      '@typescript-eslint/switch-exhaustiveness-check': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/prefer-for-of': 'off',
      'max-lines': ['error', { max: 300, skipBlankLines: false, skipComments: false }],
      'max-lines-per-function': ['error', { max: 60 }],
      'no-restricted-properties': ['error', { object: 'Math', property: 'random', message: 'Use the seeded generator.' }],
      'no-restricted-globals': ['error', { name: 'Date', message: 'No clock: same input, same bytes.' }],
    },
  },
  {
    files: ['test/**/*.ts'],
    rules: { 'max-lines-per-function': 'off', 'max-lines': ['error', { max: 500 }] },
  },
);
