import { type CutPlane } from '../scene/cut-plane-layer';
import { type CutHalves, type HalfSurface } from './cut-halves';

/** What the page sends to the worker that cuts. The model comes first, once. */
export type ToCutter =
  | { readonly kind: 'model'; readonly surface: HalfSurface }
  | { readonly kind: 'cut'; readonly id: number; readonly plane: CutPlane };

/** What comes back, one answer a cut. */
export type FromCutter =
  | { readonly kind: 'halves'; readonly id: number; readonly halves: CutHalves }
  | { readonly kind: 'failed'; readonly id: number };
