import { z } from 'zod';

export interface Tally {
  passed: number;
  failed: number;
  /** Full names of the tests that did not run. */
  skipped: string[];
}

/** What is read of Vitest's JSON report. */
const reportSchema = z.object({
  success: z.boolean(),
  testResults: z.array(
    z.object({
      name: z.string(),
      status: z.string(),
      message: z.string().optional(),
      assertionResults: z.array(z.object({ fullName: z.string(), status: z.string() })),
    }),
  ),
});

/**
 * Counts tests, and whatever went wrong outside of one: a file that could not be loaded, an error after its tests, a
 * runner that crashed. Each of these is one failure, so that "0 failed" is never said of a run that did not end well.
 * @param report text of the JSON report; null when the runner wrote none
 * @param exitStatus of the runner; null when a signal ended it
 */
export function countVitestResults(report: string | null, exitStatus: number | null): Tally {
  const read = reportSchema.safeParse(report === null ? null : parseOrNull(report));
  if (!read.success) return { passed: 0, failed: 1, skipped: [] };
  const tally: Tally = { passed: 0, failed: 0, skipped: [] };
  for (const file of read.data.testResults) {
    let failedHere = 0;
    for (const test of file.assertionResults) {
      if (test.status === 'passed') tally.passed++;
      else if (test.status === 'failed') failedHere++;
      else tally.skipped.push(`${file.name}: ${test.fullName}`);
    }
    if (file.status === 'failed' && failedHere === 0) failedHere = 1;
    tally.failed += failedHere;
  }
  const endedWell = exitStatus === 0 && read.data.success;
  if (!endedWell && tally.failed === 0) tally.failed = 1;
  return tally;
}

function parseOrNull(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}
