import { describe, expect, it } from 'vitest';
import { countsOf } from '../vitest-counts.mjs';

const report = (passed: number, failed: number, pending = 0, todo = 0, testResults: object[] = []) => ({
  numPassedTests: passed,
  numFailedTests: failed,
  numPendingTests: pending,
  numTodoTests: todo,
  testResults,
});

describe('countsOf', () => {
  it('counts passed, failed and skipped tests', () => {
    expect(countsOf(report(10, 0), 0)).toEqual({ passed: 10, failed: 0, skipped: 0 });
    expect(countsOf(report(8, 2, 1, 3), 1)).toEqual({ passed: 8, failed: 2, skipped: 4 });
  });

  it('counts a file that could not be loaded', () => {
    const files = [
      { status: 'failed', assertionResults: [] },
      { status: 'failed', assertionResults: [{ status: 'failed' }] },
      { status: 'passed', assertionResults: [{ status: 'passed' }] },
    ];
    expect(countsOf(report(5, 1, 0, 0, files), 1)).toEqual({ passed: 5, failed: 2, skipped: 0 });
  });

  it('never calls a broken or empty run a success', () => {
    expect(countsOf(null, 0).failed).toBe(1);
    expect(countsOf(report(5, 0), 1).failed).toBe(1);
    expect(countsOf(report(0, 0), 0).failed).toBe(1);
    expect(countsOf(report(0, 0, 7), 0)).toEqual({ passed: 0, failed: 1, skipped: 7 });
  });
});
