import eslint from '@eslint/js';
import svelte from 'eslint-plugin-svelte';
import tseslint from 'typescript-eslint';

/** Directions of imports; dependency-cruiser checks the same, but does not see types in .svelte. */
const direction = (files, patterns, message) => ({
  files,
  rules: {
    '@typescript-eslint/no-restricted-imports': ['error', { patterns: [{ ...patterns, message }] }],
  },
});

const NODE = {
  process: 'readonly',
  console: 'readonly',
  performance: 'readonly',
  URL: 'readonly',
  setTimeout: 'readonly',
  clearTimeout: 'readonly',
};

const CLOCK_AND_CHANCE = 'Time and chance come in as arguments.';

export default tseslint.config(
  { ignores: ['node_modules/', 'dist/', 'data/', 'test/output/'] },
  eslint.configs.recommended,
  {
    files: ['**/*.ts'],
    extends: [...tseslint.configs.recommendedTypeChecked],
    languageOptions: {
      parserOptions: {
        projectService: true,
        extraFileExtensions: ['.svelte'],
        tsconfigRootDir: import.meta.dirname,
      },
    },
    rules: {
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-unused-vars': [
        'error',
        { argsIgnorePattern: '^_', varsIgnorePattern: '^_' },
      ],
      // Branded figures are numbers.
      '@typescript-eslint/no-unsafe-unary-minus': 'off',
      // Ports promise; an implementation may have nothing to wait for.
      '@typescript-eslint/require-await': 'off',
      '@typescript-eslint/switch-exhaustiveness-check': [
        'error',
        { considerDefaultExhaustiveForUnions: true },
      ],
      '@typescript-eslint/restrict-template-expressions': [
        'error',
        { allowNumber: true, allowBoolean: true, allowNullish: true },
      ],
    },
  },
  {
    // Matchers and parsed answers are any until the test has looked at them.
    files: ['test/**/*.ts'],
    rules: {
      '@typescript-eslint/no-unsafe-assignment': 'off',
      '@typescript-eslint/no-unsafe-argument': 'off',
      '@typescript-eslint/no-unsafe-call': 'off',
      '@typescript-eslint/no-unsafe-member-access': 'off',
      '@typescript-eslint/no-unsafe-return': 'off',
      '@typescript-eslint/no-base-to-string': 'off',
    },
  },
  ...svelte.configs.recommended,
  {
    files: ['**/*.svelte', '**/*.svelte.ts'],
    plugins: { '@typescript-eslint': tseslint.plugin },
    languageOptions: { parserOptions: { parser: tseslint.parser } },
    rules: {
      // The type checker knows these better.
      'no-undef': 'off',
      'no-unused-vars': 'off',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/no-unused-vars': 'error',
    },
  },
  { files: ['**/*.{js,cjs,mjs}'], languageOptions: { globals: { ...NODE, module: 'writable' } } },
  {
    rules: {
      'max-lines': ['error', { max: 300, skipBlankLines: true, skipComments: true }],
      'no-empty': ['error', { allowEmptyCatch: false }],
      eqeqeq: 'error',
    },
  },
  {
    files: ['shared/**/*.ts'],
    rules: {
      'no-restricted-properties': [
        'error',
        { object: 'Date', property: 'now', message: CLOCK_AND_CHANCE },
        { object: 'Math', property: 'random', message: CLOCK_AND_CHANCE },
      ],
      'no-restricted-syntax': [
        'error',
        {
          selector: 'NewExpression[callee.name="Date"][arguments.length=0]',
          message: CLOCK_AND_CHANCE,
        },
        { selector: 'ExportDefaultDeclaration', message: 'Named exports only.' },
      ],
      'no-restricted-globals': ['error', 'window', 'document', 'process', 'performance', 'fetch'],
    },
  },
  direction(
    ['shared/**/*.ts'],
    { regex: '^[^.]|/(server|client|test)/' },
    'shared/ imports shared/ only: no packages, no Node.',
  ),
  direction(
    // All but the build's own settings, which run under Node.
    ['client/*.svelte', 'client/main.ts', 'client/*/**/*.{ts,svelte}'],
    { regex: '^node:|/server/|/test/' },
    'The web page meets the server in shared/ only.',
  ),
  direction(
    ['client/view/**/*.{ts,svelte}'],
    { regex: '^node:|/server/|/test/|/feed/|^(uplot|socket\\.io-client)' },
    'view/ goes to plot/ and state/ only.',
  ),
  direction(
    ['client/state/**/*.{ts,svelte}'],
    { regex: '^node:|/server/|/test/|/(view|plot)/|^(uplot|socket\\.io-client)' },
    'state/ goes to feed/ only.',
  ),
  direction(
    ['client/{feed,plot}/**/*.{ts,svelte}'],
    { regex: '^node:|/server/|/test/|/(view|state)/' },
    'feed/ and plot/ are leaves.',
  ),
);
