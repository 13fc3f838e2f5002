import {
  ChangeDetectionStrategy,
  Component,
  computed,
  inject,
  input,
  resource,
} from '@angular/core';
import { MatProgressBar } from '@angular/material/progress-bar';
import { sentenceFor } from '../../core/http/api-failure';
import { writeCount, writeLengthMm } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { type Triple } from '../scene/view-parts';
import { ViewFiles } from '../view-files';
import { Viewer } from '../viewer';
import { ViewerModelsApi } from '../viewer-models-api';
import { wholeModel } from './scaled-parts';

/** A model's picture with its size along its sides, and the same numbers in words beside it. */
@Component({
  selector: 'sw-model-view',
  imports: [MatProgressBar, Notice, Viewer],
  templateUrl: './model-view.html',
  styleUrl: './model-view.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ModelView {
  private readonly files = inject(ViewFiles);
  private readonly models = inject(ViewerModelsApi);

  readonly modelId = input.required<string>();
  /** Size to draw it in, for pages that know it or let it be changed; left out, it is asked for. */
  readonly sizeMm = input<Triple | null>();

  private readonly parts = resource({
    params: () => this.modelId(),
    loader: ({ params }) => this.files.modelView(params),
  });
  private readonly asked = resource({
    params: () => (this.sizeMm() === undefined ? this.modelId() : undefined),
    loader: async ({ params }) => (await this.models.model(params)).revision.sizeMm,
  });

  protected readonly isLoading = computed(() => this.parts.isLoading() || this.asked.isLoading());
  protected readonly trouble = computed(() => {
    const error = this.parts.error() ?? this.asked.error();
    return error ? sentenceFor(error) : '';
  });
  private readonly size = computed(() => {
    const given = this.sizeMm();
    if (given !== undefined) return given;
    return this.asked.hasValue() ? this.asked.value() : null;
  });
  protected readonly pieces = computed(() => {
    const size = this.size();
    if (!size || !this.parts.hasValue()) return [];
    const piece = wholeModel(this.parts.value(), size);
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
}
