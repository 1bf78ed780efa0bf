// @ts-check
import eslint from '@eslint/js';
import angular from 'angular-eslint';
import prettier from 'eslint-config-prettier';
import tseslint from 'typescript-eslint';

export default tseslint.config(
  {
    ignores: [
      'node_modules',
      'dist',
      '.angular',
      'data',
      'test-results',
      'reports',
      'coverage',
      'src/assets',
    ],
  },
  {
    files: ['**/*.ts'],
    extends: [
      eslint.configs.recommended,
      ...tseslint.configs.strict,
      ...tseslint.configs.stylistic,
      prettier,
    ],
    rules: {
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-non-null-assertion': 'off',
      // A decorated class of TypeORM or Angular may have nothing else.
      '@typescript-eslint/no-extraneous-class': ['error', { allowWithDecorator: true }],
      // Control characters are what these expressions are about.
      'no-control-regex': 'off',
      'no-console': 'error',
      eqeqeq: 'error',
    },
  },
  {
    files: ['shared/**/*.ts', 'server/**/*.ts', 'src/**/*.ts'],
    rules: { 'no-restricted-imports': ['error', { patterns: ['**/dist/*'] }] },
  },
  {
    files: ['server/cli/**/*.ts', 'spec/bench/**/*.ts', 'samples/**/*.ts'],
    rules: { 'no-console': 'off' },
  },
  {
    files: ['src/**/*.ts'],
    extends: [...angular.configs.tsRecommended],
    processor: angular.processInlineTemplates,
    languageOptions: {
      parserOptions: {
        project: ['src/tsconfig.spec.json', 'src/tsconfig.worker.json', 'src/tsconfig.app.json'],
      },
    },
    rules: {
      '@angular-eslint/directive-selector': [
        'error',
        { type: 'attribute', prefix: 'lw', style: 'camelCase' },
      ],
      '@angular-eslint/component-selector': ['error', { type: 'element', prefix: 'lw', style: 'kebab-case' }],
      '@angular-eslint/prefer-on-push-component-change-detection': 'error',
      '@angular-eslint/no-experimental': 'error',
      '@angular-eslint/no-developer-preview': 'error',
    },
  },
  {
    files: ['src/**/*.html'],
    extends: [...angular.configs.templateRecommended, ...angular.configs.templateAccessibility],
  },
  {
    files: ['**/*.mjs', '*.js'],
    extends: [eslint.configs.recommended, prettier],
    languageOptions: {
      globals: { process: 'readonly', URL: 'readonly', Buffer: 'readonly', console: 'readonly' },
    },
  },
);
