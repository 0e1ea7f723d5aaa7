const { TestEnvironment } = require('jest-environment-node')

/**
 * A Node environment whose tests can reach packages as Node itself loads them. Inside jest's own module world
 * PGlite's dynamic imports end the whole run, and packages that are ES modules only cannot be loaded at all.
 */
module.exports = class OuterEnvironment extends TestEnvironment {
  async setup() {
    await super.setup()
    this.global.requireOutside = (name) => require(name)
    this.global.importOutside = (name) => import(name)
    this.lastThings = []
    this.global.atEndOfFile = (lastThing) => this.lastThings.push(lastThing)
  }

  async teardown() {
    for (const lastThing of this.lastThings) await lastThing()
    await super.teardown()
  }
}
