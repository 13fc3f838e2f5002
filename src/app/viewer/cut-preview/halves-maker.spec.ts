import { TestBed } from '@angular/core/testing';
import { type CutPlane } from '../scene/cut-plane-layer';
import { type FromCutter, type ToCutter } from './cut-messages';
import { CutFailed, HalvesMaker, START_CUTTER, type CutterThread } from './halves-maker';

const planeAt = (offsetMm: number): CutPlane => ({ normal: [1, 0, 0], offsetMm });
const surface = { positions: new Float32Array(9), indices: new Uint32Array([0, 1, 2]) };
const halves = { above: null, below: surface };

/** A thread that answers when the test says so. */
class PlayedThread implements CutterThread {
  readonly received: ToCutter[] = [];
  isTerminated = false;
  private answer: (event: MessageEvent<FromCutter>) => void = () => undefined;
  postMessage(message: ToCutter): void {
    this.received.push(message);
  }
  addEventListener(type: string, listen: (event: MessageEvent<FromCutter>) => void): void {
    if (type === 'message') this.answer = listen;
  }
  terminate(): void {
    this.isTerminated = true;
  }
  get cuts(): Extract<ToCutter, { kind: 'cut' }>[] {
    return this.received.filter((message) => message.kind === 'cut');
  }
  send(message: FromCutter): void {
    this.answer(new MessageEvent('message', { data: message }));
  }
}

function setUp() {
  const threads: PlayedThread[] = [];
  TestBed.configureTestingModule({
    providers: [
      HalvesMaker,
      {
        provide: START_CUTTER,
        useValue: () => {
          const thread = new PlayedThread();
          threads.push(thread);
          return thread;
        },
      },
    ],
  });
  const maker = TestBed.inject(HalvesMaker);
  maker.setModel(surface);
  return { maker, threads };
}

describe('HalvesMaker', () => {
  it('sends the model first and gives back the halves of a cut', async () => {
    const { maker, threads } = setUp();
    const cut = maker.cut(planeAt(1));
    expect(threads[0]!.received.map(({ kind }) => kind)).toEqual(['model', 'cut']);
    threads[0]!.send({ kind: 'halves', id: threads[0]!.cuts[0]!.id, halves });
    await expect(cut).resolves.toBe(halves);
  });

  it('skips the planes that were passed by while a cut was running', async () => {
    const { maker, threads } = setUp();
    const cuts = [1, 2, 3].map((offsetMm) => maker.cut(planeAt(offsetMm)));
    const thread = threads[0]!;
    expect(thread.cuts.map(({ plane }) => plane.offsetMm)).toEqual([1]);
    thread.send({ kind: 'halves', id: thread.cuts[0]!.id, halves });
    thread.send({ kind: 'halves', id: thread.cuts[1]!.id, halves });
    expect(thread.cuts.map(({ plane }) => plane.offsetMm)).toEqual([1, 3]);
    await expect(Promise.all(cuts)).resolves.toEqual([null, null, halves]);
  });

  it('rejects a cut that failed and goes on with the next', async () => {
    const { maker, threads } = setUp();
    const failing = maker.cut(planeAt(1));
    threads[0]!.send({ kind: 'failed', id: threads[0]!.cuts[0]!.id });
    await expect(failing).rejects.toBeInstanceOf(CutFailed);
    const next = maker.cut(planeAt(2));
    threads[0]!.send({ kind: 'halves', id: threads[0]!.cuts[1]!.id, halves });
    await expect(next).resolves.toBe(halves);
  });

  it('ends the thread and leaves nobody waiting when the model changes or the page closes', async () => {
    const { maker, threads } = setUp();
    const first = maker.cut(planeAt(1));
    maker.setModel(surface);
    await expect(first).resolves.toBeNull();
    expect(threads[0]!.isTerminated).toBe(true);
    const second = maker.cut(planeAt(1));
    TestBed.resetTestingModule();
    await expect(second).resolves.toBeNull();
    expect(threads[1]!.isTerminated).toBe(true);
  });
});
