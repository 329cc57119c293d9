// Ends a test run with one line that people and machines can read: `N passed, N failed`.
import type { Reporter, SerializedError, TestModule } from 'vitest/node'

export default class CountReporter implements Reporter {
  onTestRunEnd(modules: readonly TestModule[], unhandled: readonly SerializedError[]): void {
    let passed = 0
    // An error outside any test, or a file that fails before its first test, is a failure too.
    let failed = unhandled.length
    for (const module of modules) {
      failed += module.errors().length
      for (const suite of module.children.allSuites()) failed += suite.errors().length
      for (const test of module.children.allTests()) {
        const { state } = test.result()
        if (state === 'passed') passed += 1
        else if (state === 'failed') failed += 1
      }
    }
    if (passed + failed === 0) failed = 1
    // On exit, so that nothing a tear-down says comes after it.
    process.once('exit', () => process.stdout.write(`${passed} passed, ${failed} failed\n`))
  }
}
