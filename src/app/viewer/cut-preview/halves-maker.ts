import { Injectable, InjectionToken, type OnDestroy, inject } from '@angular/core';
import { type CutPlane } from '../scene/cut-plane-layer';
import { type CutHalves, type HalfSurface } from './cut-halves';
import { type FromCutter, type ToCutter } from './cut-messages';

/** The part of a worker that we use. */
export interface CutterThread {
  postMessage(message: ToCutter): void;
  addEventListener(type: 'message', listen: (event: MessageEvent<FromCutter>) => void): void;
  addEventListener(type: 'error', listen: () => void): void;
  terminate(): void;
}

/** Starts the thread; replaced in tests. */
export const START_CUTTER = new InjectionToken<() => CutterThread>('START_CUTTER', {
  factory: () => () =>
    new Worker(new URL('./cut-halves.worker', import.meta.url), { type: 'module' }),
});

/** Thrown when the preview engine could not cut. */
export class CutFailed extends Error {}

/**
 * Cuts in a thread of its own, so that the page stays alive. While one cut runs only the latest
 * further one is kept: planes that were passed by on the way are never cut.
 */
@Injectable()
export class HalvesMaker implements OnDestroy {
  private readonly start = inject(START_CUTTER);
  private thread: CutterThread | null = null;
  private running: Order | null = null;
  private waiting: Order | null = null;
  private lastId = 0;

  /** Takes a model; cuts of an earlier one that are still open come to nothing. */
  setModel(surface: HalfSurface): void {
    this.stop();
    this.thread = this.start();
    this.thread.addEventListener('message', ({ data }) => this.take(data));
    this.thread.addEventListener('error', () => this.fail());
    this.thread.postMessage({ kind: 'model', surface });
  }

  /** The halves, or null when a later cut has overtaken this one. Rejects with CutFailed. */
  cut(plane: CutPlane): Promise<CutHalves | null> {
    return new Promise((resolve, reject) => {
      this.waiting?.resolve(null);
      this.waiting = { id: ++this.lastId, plane, resolve, reject };
      this.next();
    });
  }

  ngOnDestroy(): void {
    this.stop();
  }

  private next(): void {
    if (this.running || !this.waiting || !this.thread) return;
    this.running = this.waiting;
    this.waiting = null;
    this.thread.postMessage({ kind: 'cut', id: this.running.id, plane: this.running.plane });
  }

  private take(message: FromCutter): void {
    const order = this.running;
    if (!order || order.id !== message.id) return;
    this.running = null;
    if (message.kind === 'failed') order.reject(new CutFailed());
    else order.resolve(this.waiting ? null : message.halves);
    this.next();
  }

  private fail(): void {
    this.running?.reject(new CutFailed());
    this.running = null;
    this.next();
  }

  private stop(): void {
    this.thread?.terminate();
    this.thread = null;
    this.running?.resolve(null);
    this.waiting?.resolve(null);
    this.running = null;
    this.waiting = null;
  }
}

interface Order {
  readonly id: number;
  readonly plane: CutPlane;
  readonly resolve: (halves: CutHalves | null) => void;
  readonly reject: (error: CutFailed) => void;
}
