import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
} from '@angular/core';
import { MatProgressBar } from '@angular/material/progress-bar';
import { MatSlideToggle } from '@angular/material/slide-toggle';
import { writeCount, writeLengthMm } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { type Triple } from '../scene/view-parts';
import { Viewer } from '../viewer';
import { ModelViewStore } from './model-view-store';
import { boxOf, pictureFactor, rimsOf, wholeModel } from './scaled-parts';
import { WallLegend } from './wall-legend';

/** A model's picture with its size along its sides, and the same numbers in words below it. */
@Component({
  selector: 'sw-model-view',
  imports: [MatProgressBar, MatSlideToggle, Notice, Viewer, WallLegend],
  providers: [ModelViewStore],
  templateUrl: './model-view.html',
  styleUrl: './model-view.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ModelView {
  protected readonly store = inject(ModelViewStore);

  readonly modelId = input.required<string>();
  /** Size to draw it in, for pages that know it or let it be changed; left out, it is asked for. */
  readonly sizeMm = input<Triple | null>();
  /** Changes when there is another picture under the same model: it is then fetched again. */
  readonly version = input('');
  /** A place to fly to, in the unit of the picture's file; another object flies there again. */
  readonly place = input<{ readonly at: Triple; readonly reach: number } | null>(null);
  /** Where the scale of wall thickness ends, in the unit of the file; null when it is not known. */
  readonly wallsTo = input<number | null>(null);

  private readonly asksSize = computed(() => this.sizeMm() === undefined);
  private readonly size = computed(() => this.sizeMm() ?? this.store.sizeMm());
  protected readonly pieces = computed(() => {
    const size = this.size();
    const parts = this.store.parts();
    const piece = size && parts ? wholeModel(parts, size) : null;
    return piece ? [piece] : [];
  });
  private readonly factor = computed(() => {
    const size = this.size();
    const parts = this.store.parts();
    return size && parts ? pictureFactor(boxOf(parts.surfaces).size, size) : null;
  });
  protected readonly rims = computed(() => {
    const parts = this.store.parts();
    const factor = this.factor();
    return parts && factor !== null ? rimsOf(parts, factor) : [];
  });
  protected readonly placeMm = computed(() => {
    const place = this.place();
    const factor = this.factor();
    if (!place || factor === null) return null;
    const [x, y, z] = place.at;
    const atMm = [x * factor, y * factor, z * factor] as const;
    return { atMm, reachMm: place.reach * factor };
  });
  protected readonly scaleEndMm = computed(() => {
    const to = this.wallsTo();
    const factor = this.factor();
    const hasWalls = this.store.parts()?.surfaces.some((surface) => surface.walls) ?? false;
    return hasWalls && to !== null && factor !== null ? to * factor : null;
  });
  protected readonly isColoured = signal(false);
  protected readonly wallsToMm = computed(() => (this.isColoured() ? this.scaleEndMm() : null));
  protected readonly sides = computed(() => {
    const size = this.size();
    if (!size) return [];
    return ['x', 'y', 'z'].map((axis, at) => ({ axis, length: writeLengthMm(size[at]!) }));
  });
  protected readonly triangles = computed(() => {
    const piece = this.pieces()[0];
    return piece ? writeCount(piece.surface.indices.length / 3) : '';
  });
  protected readonly description = computed(() => {
    const sides = this.sides().map((side) => `${side.axis} ${side.length}`);
    return `Picture of the model, ${sides.join(', ')}. The same numbers stand below it.`;
  });

  constructor() {
    effect(() => {
      const id = this.modelId();
      const asksSize = this.asksSize();
      this.version();
      untracked(() => void this.store.open(id, asksSize));
    });
  }
}
