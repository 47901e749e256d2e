import nextVitals from 'eslint-config-next/core-web-vitals'
import nextTypeScript from 'eslint-config-next/typescript'
import prettier from 'eslint-config-prettier'

const SOURCES = ['**/*.ts', '**/*.tsx']

// A value from a request must reach the database as a parameter, never as text.
const SQL_AS_TEXT = {
  selector: "MemberExpression[object.name='sql'][property.name=/^(raw|lit|ref|table|id)$/]",
  message: 'Write the name out or pass the value as a parameter.',
}

const OWN_CLOCK = {
  selector:
    "CallExpression[callee.object.name='Date'][callee.property.name='now'], NewExpression[callee.name='Date'][arguments.length=0]",
  message: "Ask the database's clock: it decides whether something was in time.",
}

const config = [
  {
    ignores: [
      '.next/',
      '.data/',
      'node_modules/',
      'test-results/',
      'playwright-report/',
      'next-env.d.ts',
      'db/tables.ts',
    ],
  },
  ...nextVitals,
  ...nextTypeScript,
  prettier,
  {
    files: SOURCES,
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: {
      // A promise nobody waits for is a change that may be lost, and a failure nobody hears of.
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports' }],
      eqeqeq: ['error', 'always', { null: 'ignore' }],
    },
  },
  {
    files: ['app/**', 'db/**', 'lib/**', 'migrations/**', 'proxy.ts'],
    ignores: ['lib/commands/**', 'db/commands/**'],
    rules: {
      // The log redacts; the console does not.
      'no-console': 'error',
      'no-restricted-properties': [
        'error',
        {
          object: 'Math',
          property: 'random',
          message: 'Take randomness from the context: codes must not be guessable.',
        },
      ],
    },
  },
  {
    files: ['app/**', 'db/anonymous/**', 'db/queries/**', 'lib/**'],
    ignores: ['lib/commands/**'],
    rules: {
      'no-restricted-syntax': ['error', SQL_AS_TEXT],
    },
  },
  {
    files: ['lib/domain/**', 'lib/use-cases/**'],
    rules: {
      'no-restricted-syntax': ['error', SQL_AS_TEXT, OWN_CLOCK],
    },
  },
]

export default config
