import { HalvesCutter, type HalfSurface } from './cut-halves';
import { type FromCutter, type ToCutter } from './cut-messages';

let cutter: HalvesCutter | null = null;

addEventListener('message', ({ data }: MessageEvent<ToCutter>) => {
  if (data.kind === 'model') cutter = new HalvesCutter(data.surface);
  else answer(data);
});

function answer({ id, plane }: Extract<ToCutter, { kind: 'cut' }>): void {
  try {
    if (!cutter) throw new Error('The model has to come before a cut.');
    const halves = cutter.cut(plane);
    send({ kind: 'halves', id, halves }, [halves.above, halves.below]);
  } catch {
    // Expected on meshes that the preview engine cannot follow; the page says so in words.
    send({ kind: 'failed', id }, []);
  }
}

function send(message: FromCutter, surfaces: readonly (HalfSurface | null)[]): void {
  const buffers = surfaces.flatMap((surface) =>
    surface ? [surface.positions.buffer, surface.indices.buffer] : [],
  );
  postMessage(message, { transfer: buffers as ArrayBuffer[] });
}
