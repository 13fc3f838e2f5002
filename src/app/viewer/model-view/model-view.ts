import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  untracked,
} from '@angular/core';
import { MatProgressBar } from '@angular/material/progress-bar';
import { writeCount, writeLengthMm } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { type Triple } from '../scene/view-parts';
import { Viewer } from '../viewer';
import { ModelViewStore } from './model-view-store';
import { wholeModel } from './scaled-parts';

/** A model's picture with its size along its sides, and the same numbers in words below it. */
@Component({
  selector: 'sw-model-view',
  imports: [MatProgressBar, Notice, Viewer],
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

  private readonly asksSize = computed(() => this.sizeMm() === undefined);
  private readonly size = computed(() => this.sizeMm() ?? this.store.sizeMm());
  protected readonly pieces = computed(() => {
    const size = this.size();
    const parts = this.store.parts();
    const piece = size && parts ? wholeModel(parts, size) : null;
    return piece ? [piece] : [];
  });
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
      untracked(() => void this.store.open(id, asksSize));
    });
  }
}
