// Hostile input, the short form of long-run.ts: whatever the text, a result of finite numbers or an error of ours in one line.
import * as fc from 'fast-check';
import { expect, test } from 'vitest';
import { calls, runCall } from './command-line.js';
import { TARGETS } from './targets.js';

const RUNS = { structure: 4000, stream: 1500, scan: 2500 } as const;

test.each(Object.entries(TARGETS))('%s', { timeout: 120_000 }, (name, { inputs, run }) => {
  const count = { read: 0, refused: 0 };
  fc.assert(
    fc.property(inputs, ({ text }) => {
      count[run(text)]++;
    }),
    { numRuns: RUNS[name as keyof typeof RUNS], seed: 7, endOnFailure: false },
  );
  // Both ends are reached, or the inputs do not test what they say.
  expect(count.read).toBeGreaterThan(0.05 * (count.read + count.refused));
  expect(count.refused).toBeGreaterThan(0.05 * (count.read + count.refused));
});

test('command line', { timeout: 120_000 }, async () => {
  const codes = { 0: 0, 2: 0 } as Record<number, number>;
  await fc.assert(
    fc.asyncProperty(calls, async (call) => {
      codes[await runCall(call)]!++;
    }),
    { numRuns: 600, seed: 7, endOnFailure: false },
  );
  expect(Math.min(codes[0]!, codes[2]!)).toBeGreaterThan(10);
});
