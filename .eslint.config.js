import reactHooks from 'eslint-plugin-react-hooks'
import tseslint from 'typescript-eslint'

/** Rules that catch mistakes, and the house's own; how a line is broken is nobody's business here. */
export default tseslint.config(
  { ignores: ['node_modules/**', 'dist/**', 'data/**', '.cache/**', 'drizzle/**', '**/*.mjs', '**/*.js', 'src/public/**'] },
  { linterOptions: { reportUnusedDisableDirectives: 'error' } },
  {
    files: ['**/*.ts', '**/*.tsx'],
    languageOptions: { parser: tseslint.parser, parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    plugins: { '@typescript-eslint': tseslint.plugin },
    rules: {
      // A statement of the query builder is a thenable: without an await it is never sent.
      '@typescript-eslint/no-floating-promises': ['error', { checkThenables: true }],
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false, arguments: false, properties: false }, checksSpreads: false }],
      '@typescript-eslint/await-thenable': 'error',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/switch-exhaustiveness-check': ['error', { considerDefaultExhaustiveForUnions: true }],
      '@typescript-eslint/consistent-type-imports': ['error', { disallowTypeAnnotations: false }],
      '@typescript-eslint/only-throw-error': 'error',
      '@typescript-eslint/ban-ts-comment': ['error', { 'ts-expect-error': 'allow-with-description' }],
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      'no-var': 'error',
      'prefer-const': 'error',
      'no-control-regex': 'off',
      'no-eval': 'error',
      'no-new-func': 'error',
      'no-console': 'error',
      'no-warning-comments': ['error', { terms: ['todo', 'fixme', 'xxx'] }],
      'no-restricted-syntax': [
        'error',
        { selector: 'TSEnumDeclaration', message: 'A union of literals in place of an enum.' },
        { selector: 'ExportAllDeclaration', message: 'No barrels: import from the file that has it.' },
        { selector: 'ExportDefaultDeclaration', message: 'A named export; only settings files and lazy routes have a default one.' },
        { selector: "CallExpression[callee.object.name=/^(it|test|describe)$/][callee.property.name=/^(only|skip|todo)$/]", message: 'Every test runs.' },
      ],
    },
  },
  { files: ['**/*.tsx', 'src/**/*.ts'], plugins: { 'react-hooks': reactHooks }, rules: reactHooks.configs.recommended.rules },
  // A route leaves by throwing a redirect; that is the router's way.
  { files: ['src/routes/**', 'src/router.tsx'], rules: { '@typescript-eslint/only-throw-error': 'off' } },
  { files: ['*.config.ts', 'src/routes/**', 'src/router.tsx'], rules: { 'no-restricted-syntax': 'off' } },
)
