import { afterEach, beforeEach, expect, vi } from 'vitest';

// Output nobody expected is a defect that scrolls by: here it fails the test that caused it.
// A test that provokes a message mocks that console method itself.
const methods = ['error', 'warn', 'log', 'info'] as const;
let unexpected: string[] = [];

beforeEach(() => {
  unexpected = [];
  for (const method of methods) {
    vi.spyOn(console, method).mockImplementation((...parts: unknown[]) => {
      unexpected.push(`${method}: ${parts.map(String).join(' ')}`);
    });
  }
});

afterEach(() => {
  expect(unexpected, 'unexpected console output').toEqual([]);
});
