import type { Reporter, TestModule } from 'vitest/node';

/** Prints the count in one plain last line, for whoever reads the output by machine. */
export default class ClosingLine implements Reporter {
  onTestRunEnd(modules: readonly TestModule[]): void {
    let passed = 0;
    let failed = 0;
    let skipped = 0;
    for (const module of modules) {
      if (module.errors().length > 0) failed += 1;
      for (const test of module.children.allTests()) {
        const { state } = test.result();
        if (state === 'passed') passed += 1;
        else if (state === 'failed') failed += 1;
        else skipped += 1;
      }
    }
    process.on('exit', () =>
      process.stdout.write(`${passed} passed, ${failed} failed${skipped ? `, ${skipped} skipped` : ''}\n`),
    );
  }
}
