import expo from 'eslint-config-expo/flat.js'
import prettier from 'eslint-config-prettier'

const noDrizzle = {
  group: ['drizzle-orm', 'drizzle-orm/*', 'pg', '@electric-sql/*'],
  message: 'SQL lives in db/ and server/.',
}
const noServer = {
  group: ['@/server/*', '@/db/*', 'express', 'node:*'],
  message: 'A screen reaches the server through shared/contracts and modules/api only.',
}
const noReact = {
  group: ['react', 'react-dom', 'react-native', 'react-native-*', 'expo', 'expo-*'],
  message: 'React belongs to app/ and modules/.',
}

const only = (...patterns) => ({ 'no-restricted-imports': ['error', { patterns }] })

export default [
  { ignores: ['node_modules/', 'dist/', '.expo/', '.data/', 'coverage/', 'expo-env.d.ts'] },
  ...expo,
  prettier,
  {
    linterOptions: { reportUnusedDisableDirectives: 'error' },
    rules: {
      eqeqeq: 'error',
      'no-console': 'error',
      'no-var': 'error',
      'prefer-const': 'error',
      // TypeScript resolves imports; tests/architecture.test.ts holds their direction and finds cycles.
      'import/no-unresolved': 'off',
      'import/namespace': 'off',
      'import/no-named-as-default': 'off',
      'import/no-named-as-default-member': 'off',
    },
  },
  {
    files: ['**/*.{ts,tsx}'],
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/ban-ts-comment': 'error',
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports' }],
      '@typescript-eslint/no-unused-vars': [
        'error',
        { argsIgnorePattern: '^_', varsIgnorePattern: '^_', destructuredArrayIgnorePattern: '^_' },
      ],
    },
  },
  { files: ['app/**', 'modules/**'], rules: only(noDrizzle, noServer) },
  {
    files: ['server/**', 'db/**'],
    rules: { ...only(noReact), 'expo/no-dynamic-env-var': 'off' },
  },
  { files: ['shared/**'], rules: only(noDrizzle, noServer, noReact) },
  {
    files: [
      'server/build.mjs',
      'server/launch.mjs',
      'server/check-book.ts',
      'server/main.ts',
      'tests/**',
    ],
    rules: { 'no-console': 'off' },
  },
  {
    files: ['**/*.{js,cjs,mjs}'],
    languageOptions: {
      globals: {
        Buffer: 'readonly',
        __dirname: 'readonly',
        __filename: 'readonly',
        console: 'readonly',
        fetch: 'readonly',
        global: 'readonly',
        module: 'writable',
        process: 'readonly',
        require: 'readonly',
        setTimeout: 'readonly',
        clearTimeout: 'readonly',
        URL: 'readonly',
      },
    },
  },
  {
    files: ['tests/**'],
    languageOptions: {
      globals: { jest: 'readonly', describe: 'readonly', test: 'readonly', expect: 'readonly' },
    },
    rules: { '@typescript-eslint/no-require-imports': 'off', 'expo/no-dynamic-env-var': 'off' },
  },
]
