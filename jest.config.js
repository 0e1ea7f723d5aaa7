// Days are cut at a site's own midnight: a test machine that is not in UTC shows where one was not.
process.env.TZ = 'Pacific/Auckland'

// watchPlugins belong to a whole run, not to one project.
const { watchPlugins: _, ...jestExpoWeb } = require('jest-expo/web/jest-preset')

const node = {
  testEnvironment: '<rootDir>/tests/helpers/jest/outer-environment.cjs',
  transform: { '\\.tsx?$': '<rootDir>/tests/helpers/jest/typescript-transform.cjs' },
  moduleFileExtensions: ['ts', 'tsx', 'js', 'mjs', 'cjs', 'json', 'node'],
  moduleNameMapper: {
    '^@/(.*)$': '<rootDir>/$1',
    '^@electric-sql/pglite$': '<rootDir>/tests/helpers/jest/outer-pglite.cjs',
    '^@seriousme/openapi-schema-validator$':
      '<rootDir>/tests/helpers/jest/outer-openapi-validator.cjs',
  },
}

const inFolders = (...folders) =>
  folders.map((folder) => `<rootDir>/tests/${folder}/**/*.test.{ts,tsx}`)

module.exports = {
  maxWorkers: 2,
  testTimeout: 60_000,
  projects: [
    { ...node, displayName: 'shared', testMatch: inFolders('shared', 'reference') },
    {
      ...node,
      displayName: 'server',
      testMatch: inFolders('db', 'server', 'book', 'documents'),
      globalSetup: '<rootDir>/tests/helpers/jest/make-template-database.ts',
      globalTeardown: '<rootDir>/tests/helpers/jest/drop-template-database.ts',
    },
    {
      ...jestExpoWeb,
      displayName: 'modules',
      testMatch: inFolders('modules', 'app'),
      moduleNameMapper: { ...jestExpoWeb.moduleNameMapper, '^@/(.*)$': '<rootDir>/$1' },
      setupFilesAfterEnv: ['<rootDir>/tests/helpers/jest/screen-setup.ts'],
    },
    { ...node, displayName: 'architecture', testMatch: ['<rootDir>/tests/architecture.test.ts'] },
    {
      ...node,
      displayName: 'browser',
      testMatch: inFolders('browser'),
      globalSetup: '<rootDir>/tests/helpers/jest/make-demo-folder.ts',
      globalTeardown: '<rootDir>/tests/helpers/jest/remove-demo-folder.ts',
    },
  ],
}
