import { describe, expect, it } from 'vitest';
import { addTally, countReport, isGood, tallyLine } from '@/scripts/test/tally.mjs';

const report = {
  success: true,
  numPassedTests: 3,
  numFailedTests: 0,
  numPendingTests: 0,
  numTodoTests: 0,
  testResults: [{ status: 'passed', assertionResults: [{ status: 'passed' }] }],
};

describe('the count of a test run', () => {
  it('is what the report says when all is well', () => {
    expect(countReport(report)).toEqual({ passed: 3, failed: 0, skipped: 0 });
  });

  it('counts skipped and undone tests apart', () => {
    const some = { ...report, numPendingTests: 2, numTodoTests: 1 };
    expect(countReport(some)).toEqual({ passed: 3, failed: 0, skipped: 3 });
  });

  it('counts a file that did not load as one failure beside the failed tests', () => {
    const files = [
      { status: 'failed', assertionResults: [{ status: 'failed' }] },
      { status: 'failed', assertionResults: [] },
    ];
    const bad = { ...report, success: false, numFailedTests: 1, testResults: files };
    expect(countReport(bad)).toEqual({ passed: 3, failed: 2, skipped: 0 });
  });

  it('fails when an error happened outside of every test', () => {
    expect(countReport({ ...report, success: false }).failed).toBe(1);
  });

  it.each([undefined, null, 'text', {}])('fails without a report: %s', (missing) => {
    expect(countReport(missing)).toEqual({ passed: 0, failed: 1, skipped: 0 });
  });

  it('fails when nothing ran', () => {
    expect(countReport({ ...report, numPassedTests: 0, testResults: [] }).failed).toBe(1);
    expect(isGood({ passed: 0, failed: 0, skipped: 0 })).toBe(false);
  });

  it('is said with the skipped only where there are some', () => {
    expect(tallyLine({ passed: 12, failed: 0, skipped: 0 })).toBe('12 passed, 0 failed');
    expect(tallyLine({ passed: 12, failed: 1, skipped: 2 })).toBe('12 passed, 1 failed, 2 skipped');
  });

  it('adds up', () => {
    const sum = addTally({ passed: 1, failed: 2, skipped: 3 }, { passed: 10, failed: 20, skipped: 30 });
    expect(sum).toEqual({ passed: 11, failed: 22, skipped: 33 });
    expect(isGood(sum)).toBe(false);
  });
});
