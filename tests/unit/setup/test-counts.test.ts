import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  closingLine,
  countSuite,
  playwrightCounts,
  sumCounts,
  vitestCounts
} from '../../../scripts/setup/test-counts.mjs';

const report = (content: unknown): string => {
  const file = join(mkdtempSync(join(tmpdir(), 'report-')), 'report.json');
  writeFileSync(file, JSON.stringify(content));
  return file;
};
const vitest = { numPassedTests: 3, numFailedTests: 0, numPendingTests: 1, numTodoTests: 0, testResults: [] };

describe('counting suites', () => {
  it('adds passed, failed and skipped of all suites', () => {
    const sum = sumCounts([
      { passed: 2, failed: 1, skipped: 0 },
      { passed: 5, failed: 0, skipped: 3 }
    ]);
    expect(closingLine(sum)).toBe('7 passed, 1 failed, 3 skipped');
    expect(closingLine({ passed: 7, failed: 0, skipped: 0 })).toBe('7 passed, 0 failed');
  });

  it('counts a test file that could not be loaded as a failure', () => {
    const broken = { ...vitest, testResults: [{ status: 'failed', assertionResults: [] }] };
    expect(vitestCounts(broken)).toEqual({ passed: 3, failed: 1, skipped: 1 });
  });

  it('counts a browser test that passes only when tried again as failed', () => {
    const stats = { expected: 4, unexpected: 0, flaky: 1, skipped: 0 };
    expect(playwrightCounts({ stats, errors: [] })).toEqual({ passed: 4, failed: 1, skipped: 0 });
  });

  it('counts a suite without a report, or with a bad end, as failed', () => {
    expect(countSuite('/no/such/report', vitestCounts, 0).failed).toBe(1);
    expect(countSuite(report(vitest), vitestCounts, 1).failed).toBe(1);
    expect(countSuite(report(vitest), vitestCounts, 0)).toEqual({ passed: 3, failed: 0, skipped: 1 });
  });
});
