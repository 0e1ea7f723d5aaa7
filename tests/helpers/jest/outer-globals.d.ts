/** What tests/helpers/jest/outer-environment.cjs adds to the world of a test file. */
declare global {
  /** Loads a package as Node itself does, outside jest's module world. */
  var requireOutside: ((name: string) => unknown) | undefined
  /** The same for a package that can only be imported. */
  var importOutside: ((name: string) => Promise<unknown>) | undefined
  /** Runs when the test file has ended, also after a failure. */
  var atEndOfFile: ((lastThing: () => unknown) => void) | undefined
}

export {}
