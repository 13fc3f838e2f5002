import { InjectionToken } from '@angular/core';

/** The part of the browser's EventSource that we use. */
export type EventStream = Pick<EventSource, 'addEventListener' | 'close'>;

/** Opens a stream of server-sent events; replaced in tests. */
export const OPEN_EVENT_STREAM = new InjectionToken<(url: string) => EventStream>(
  'OPEN_EVENT_STREAM',
  { factory: () => (url) => new EventSource(url) },
);
