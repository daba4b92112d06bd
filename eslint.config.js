import js from '@eslint/js';
import tseslint from 'typescript-eslint';
import reactHooks from 'eslint-plugin-react-hooks';

// Who may import whom. Paths are matched as written in the import, which is always relative inside this repository.
const walls = (patterns) => ({ 'no-restricted-imports': ['error', { patterns }] });
const ours = (...rooms) => ({ regex: `^(\\.\\./)+(${rooms.join('|')})(/|$)`, message: 'This room may not import that one (DEVELOPERS.md, layers).' });
const platform = { regex: '^(node:|fs$|path$|os$|crypto$|worker_threads$|express|@mikro-orm|react)', message: 'Pure code: nothing of Node, the server or the page.' };

// Results must have the same bits on every engine (DEVELOPERS.md, numerics).
const inexact = ['random', 'sin', 'cos', 'tan', 'asin', 'acos', 'atan', 'atan2', 'sinh', 'cosh', 'tanh', 'asinh', 'acosh', 'atanh', 'exp', 'expm1', 'log', 'log1p', 'log2', 'log10', 'pow', 'cbrt', 'hypot'];

export default tseslint.config(
  { ignores: ['node_modules', 'dist', 'data', '.cache', 'coverage'] },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  {
    rules: {
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_', caughtErrorsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-non-null-assertion': 'off',
      eqeqeq: ['error', 'always', { null: 'ignore' }],
    },
  },
  { files: ['.ci/**/*.mjs'], languageOptions: { globals: { process: 'readonly', console: 'readonly' } } },
  { files: ['shared/**'], rules: walls([ours('app', 'api', 'solvers', 'tests'), platform]) },
  {
    files: ['solvers/**'],
    rules: {
      ...walls([ours('app', 'api', 'tests'), platform]),
      'no-restricted-properties': ['error', ...inexact.map((property) => ({ object: 'Math', property, message: 'Engine dependent: use solvers/core/math or the seeded generator.' })), { object: 'Date', property: 'now', message: 'No clock in solvers: the caller measures.' }],
      'no-restricted-globals': ['error', 'performance', 'console', 'window', 'document', 'process', 'fetch', 'Date', 'setTimeout'],
    },
  },
  { files: ['api/**'], rules: walls([ours('app', 'tests')]) },
  {
    files: ['app/**'],
    plugins: { 'react-hooks': reactHooks },
    // A feature has an `api` folder of its own, one step up from its components; the server's rooms are named in full.
    rules: { ...reactHooks.configs.recommended.rules, ...walls([ours('tests'), ours('api/(entities|http|jobs|mail|migrations|routes|services|sign-in|main|app|env|orm)')]) },
  },
);
