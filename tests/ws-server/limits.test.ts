import { describe, expect, test } from 'vitest';
import { LIMITS, TokenBucket } from '../../ws-server/limits';

describe('a bucket', () => {
  test('lets a burst pass, then as many as its rate, and never more than a burst after a rest', () => {
    let now = 1000;
    const bucket = new TokenBucket(50, 200, () => now);
    const passed = (tries: number) =>
      Array.from({ length: tries }, () => bucket.take()).filter(Boolean).length;
    expect(passed(500)).toBe(200);
    expect(passed(10)).toBe(0);
    now += 1000;
    expect(passed(500)).toBe(50);
    now += 3_600_000;
    expect(passed(500)).toBe(200);
  });

  test('refused tries do not keep it empty', () => {
    let now = 0;
    const bucket = new TokenBucket(10, 1, () => now);
    expect(bucket.take()).toBe(true);
    for (let i = 0; i < 99; i++) {
      now += 1;
      expect(bucket.take()).toBe(false);
    }
    now += 1;
    expect(bucket.take()).toBe(true);
  });

  test('a clock that goes back gives nothing away', () => {
    let now = 5000;
    const bucket = new TokenBucket(50, 2, () => now);
    expect([bucket.take(), bucket.take(), bucket.take()]).toEqual([true, true, false]);
    now = 0;
    expect(bucket.take()).toBe(false);
  });
});

test('the bounds are those of rules C3, C4 and C10', () => {
  expect(LIMITS).toMatchObject({
    messageBytes: 2 ** 20,
    frameLength: 1_000_000,
    messagesPerSecond: 50,
    messageBurst: 200,
    socketsPerAccount: 20,
    awarenessBytes: 4096,
    awarenessPerSecond: 10,
    bufferedBytes: 4 * 2 ** 20,
    batchBytes: 64 * 1024,
    recheckMs: 30_000,
    tailMs: 2000,
  });
  expect(LIMITS.pingMs).toBeLessThanOrEqual(30_000);
});
