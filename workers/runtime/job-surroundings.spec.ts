import { describe, expect, it } from 'vitest';
import {
  AbortError,
  createCancelFlag,
  isAbortError,
  setCancelFlag,
  throwWhenSet,
} from './cancellation.js';
import { createBackoff, isTransient } from './database-retry.js';
import { portionOf } from './job-context.js';
import { steadyProgress } from './progress.js';
import { createStopSignal } from './stop-signal.js';
import { readWorkerSettings } from './worker-settings.js';

describe('cancellation', () => {
  it('throws once the flag is set, and is known by its name whoever loaded the class', () => {
    const flag = createCancelFlag();
    const throwIfCancelled = throwWhenSet(flag);
    throwIfCancelled();
    setCancelFlag(flag);
    expect(throwIfCancelled).toThrow(AbortError);
    expect(isAbortError(Object.assign(new Error('x'), { name: 'AbortError' }))).toBe(true);
    expect(isAbortError({ name: 'AbortError' })).toBe(false);
  });
});

describe('progress', () => {
  it('never falls, stays in [0, 1], and reports a stage at most every 50 ms', () => {
    const seen: [string, number][] = [];
    let now = 0;
    const report = steadyProgress(
      (stage, fraction) => seen.push([stage, fraction]),
      () => now,
    );
    report('Reading', 0.2);
    report('Reading', 0.3);
    now = 60;
    report('Reading', 0.1);
    report('Drawing', 0.35);
    now = 200;
    report('Drawing', 7);
    expect(seen).toEqual([
      ['Reading', 0.2],
      ['Reading', 0.3],
      ['Drawing', 0.35],
      ['Drawing', 1],
    ]);
  });

  it('of a step is its portion of the whole, and checks for cancellation', () => {
    const seen: number[] = [];
    let checks = 0;
    const whole = {
      throwIfCancelled: () => void checks++,
      progress: (_: string, fraction: number) => void seen.push(fraction),
    };
    const step = portionOf(portionOf(whole, 0.5, 1), 0, 0.5);
    step.progress('x', 0);
    step.progress('x', 1);
    step.progress('x', 2);
    expect(seen).toEqual([0.5, 0.75, 0.75]);
    expect(checks).toBeGreaterThan(0);
  });
});

describe('a stop', () => {
  it('ends a pause early', async () => {
    const stop = createStopSignal();
    const started = performance.now();
    const pause = stop.pause(60_000);
    stop.request();
    await pause;
    await stop.pause(60_000);
    expect(performance.now() - started).toBeLessThan(5000);
    expect(stop.requested()).toBe(true);
  });
});

describe('a database that is away', () => {
  it('is told from a statement that is wrong', () => {
    const withCode = (code: string) => Object.assign(new Error('x'), { code });
    expect(isTransient(withCode('ECONNREFUSED'))).toBe(true);
    expect(isTransient(withCode('PROTOCOL_CONNECTION_LOST'))).toBe(true);
    expect(isTransient(new Error("Can't add new command when connection is in closed state"))).toBe(
      true,
    );
    expect(isTransient(withCode('ER_PARSE_ERROR'))).toBe(false);
    expect(isTransient(withCode('ER_DATA_TOO_LONG'))).toBe(false);
    expect(isTransient('ECONNREFUSED')).toBe(false);
  });

  it('is asked again after 250 ms, then ever more rarely, up to every 5 s', () => {
    const backoff = createBackoff();
    expect(Array.from({ length: 7 }, () => backoff.nextMs())).toEqual([
      250, 500, 1000, 2000, 4000, 5000, 5000,
    ]);
    backoff.reset();
    expect(backoff.nextMs()).toBe(250);
  });
});

describe('the worker’s settings', () => {
  const databaseUrl = 'mysql://a:b@127.0.0.1:3306/c';

  it('come from the environment, with defaults', () => {
    expect(readWorkerSettings({ DATABASE_URL: databaseUrl })).toMatchObject({
      databaseUrl,
      threads: 1,
    });
    expect(
      readWorkerSettings({
        DATABASE_URL: databaseUrl,
        SEAMWRIGHT_DATA: '/data/here',
        SEAMWRIGHT_WORKERS: '3',
      }),
    ).toEqual({ databaseUrl, storageFolder: '/data/here/storage', threads: 3 });
  });

  it('are refused in a sentence when they make no sense', () => {
    expect(() => readWorkerSettings({})).toThrow(/^DATABASE_URL is not set\./);
    for (const threads of ['0', '-1', '1.5', 'many', '65'])
      expect(() =>
        readWorkerSettings({ DATABASE_URL: databaseUrl, SEAMWRIGHT_WORKERS: threads }),
      ).toThrow(/whole number from 1 to 64/);
  });
});
