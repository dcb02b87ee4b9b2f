import { describe, expect, it } from 'vitest';
import { pause, scaledClock, systemClock } from '@/agent/clock';
import { objectionAt } from '@/agent/fleet/objection';

const SPEED = 200;

describe('a clock that runs faster', () => {
  it('waits so much shorter, and measures the wait as the whole', async () => {
    const clock = scaledClock(SPEED);
    const real = systemClock();
    const [begunMs, realMs] = [clock.nowMs(), real.nowMs()];
    await pause(clock, 20 * SPEED);
    expect(real.nowMs() - realMs).toBeLessThan(20 * SPEED);
    // Timers may come a fraction of a millisecond early.
    expect(clock.nowMs() - begunMs).toBeGreaterThanOrEqual(19 * SPEED);
  });

  it('leaves the date alone', () => {
    const before = Date.now();
    const dateMs = scaledClock(SPEED).date().getTime();
    expect(dateMs).toBeGreaterThanOrEqual(before);
    expect(dateMs).toBeLessThanOrEqual(Date.now());
  });

  it('calls nothing that was called off', async () => {
    const clock = scaledClock(SPEED);
    let called = false;
    clock.after(SPEED, () => (called = true))();
    await pause(clock, 5 * SPEED);
    expect(called).toBe(false);
  });
});

describe('an agent with such a clock', () => {
  const firmware = { name: 'Marlin 2.1', machineType: '', dialect: 'main family', capabilities: {} };

  it('serves virtual rigs alone; one with the true clock serves any', () => {
    expect(objectionAt(SPEED)({ ...firmware, virtual: true })).toBeNull();
    expect(objectionAt(SPEED)({ ...firmware, virtual: false })).toContain('clockSpeed');
    expect(objectionAt(1)({ ...firmware, virtual: false })).toBeNull();
  });
});
