import 'server-only';
import { AsyncLocalStorage } from 'node:async_hooks';

const injected = new AsyncLocalStorage<Date>();

/** The server's clock, or the injected one while the demo or a test tells a story of another day. */
export function now(): Date {
  return new Date(injected.getStore() ?? Date.now());
}

/** Runs `work` with the clock standing at `instant`. A log opened under it is marked "times injected". */
export function atTime<T>(instant: Date, work: () => Promise<T>): Promise<T> {
  return injected.run(instant, work);
}

export function isClockInjected(): boolean {
  return injected.getStore() !== undefined;
}
