import { Injectable, computed, inject, linkedSignal, signal } from '@angular/core';
import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { type ModelResponse } from '../../../../shared/api/models.contract.js';
import { sentenceFor } from '../../core/http/api-failure';
import { boxOf, wholeModel } from '../model-view/scaled-parts';
import { type CutPlane } from '../scene/cut-plane-layer';
import { type ScenePiece, type SceneSeam, type ViewParts } from '../scene/view-parts';
import { ViewFiles } from '../view-files';
import { ViewerModelsApi } from '../viewer-models-api';
import { extentAlong, normalOf, type CutDirection, type Tilt } from './cut-direction';
import { type CutHalves, type HalfSurface } from './cut-halves';
import { HalvesMaker } from './halves-maker';
import { sectionLines } from './section-lines';
import { fitsUpright, usableSpace } from './upright-fit';

const halfNames = { above: 'High half', below: 'Low half' } as const;

/** One half as it stands in the table. */
export interface HalfRow {
  readonly item: number;
  readonly name: string;
  readonly sizeMm: readonly [number, number, number];
  /** Null until an envelope is chosen. */
  readonly fit: { readonly fits: boolean; readonly reason: string } | null;
}

/** One model and one movable plane through it. */
@Injectable()
export class CutPreviewStore {
  private readonly models = inject(ViewerModelsApi);
  private readonly files = inject(ViewFiles);
  private readonly maker = inject(HalvesMaker);

  private readonly _model = signal<ModelResponse | null>(null);
  private readonly parts = signal<ViewParts | null>(null);
  private readonly _envelopes = signal<readonly EnvelopeResponse[]>([]);
  private readonly _failure = signal('');
  private readonly _direction = signal<CutDirection>('x');
  private readonly _tilt = signal<Tilt>({ leanDegrees: 30, turnDegrees: 0 });
  private readonly envelopeId = signal<string | null>(null);
  private readonly halves = signal<CutHalves | null>(null);
  private readonly _isCutting = signal(false);
  private readonly _cutFailure = signal('');

  readonly model = this._model.asReadonly();
  readonly envelopes = this._envelopes.asReadonly();
  /** Why there is nothing to cut; empty otherwise. */
  readonly failure = this._failure.asReadonly();
  readonly direction = this._direction.asReadonly();
  readonly tilt = this._tilt.asReadonly();
  readonly isCutting = this._isCutting.asReadonly();
  readonly cutFailure = this._cutFailure.asReadonly();
  readonly envelope = computed(
    () => this.envelopes().find(({ id }) => id === this.envelopeId()) ?? null,
  );

  readonly whole = computed((): ScenePiece | null => {
    const size = this.model()?.revision.sizeMm;
    const parts = this.parts();
    return size && parts ? wholeModel(parts, size) : null;
  });
  readonly triangles = computed(() => (this.whole()?.surface.indices.length ?? 0) / 3);
  private readonly normal = computed(() => normalOf(this.direction(), this.tilt()));
  private readonly extent = computed(() => {
    const whole = this.whole();
    return whole ? extentAlong(whole.surface, this.normal()) : { low: 0, high: 0 };
  });
  /** Length of the model along the direction, mm. */
  readonly lengthMm = computed(() => this.extent().high - this.extent().low);
  /** Where the plane is, mm from the low end. A new direction starts in the middle. */
  private readonly _placeMm = linkedSignal({
    source: this.extent,
    computation: ({ low, high }) => Math.round((high - low) * 5) / 10,
  });
  readonly placeMm = this._placeMm.asReadonly();
  readonly plane = computed((): CutPlane => ({
    normal: this.normal(),
    offsetMm: this.extent().low + this.placeMm(),
  }));

  /** What the picture shows: both halves once they are cut, the whole before. */
  readonly pieces = computed((): readonly ScenePiece[] => {
    const whole = this.whole();
    if (!whole) return [];
    const halves = this.halfPieces();
    return halves.length > 0 ? halves : [whole];
  });
  /** The cut's outline on both halves. */
  readonly seams = computed((): readonly SceneSeam[] => {
    const whole = this.whole();
    if (!whole || this.halfPieces().length < 2) return [];
    const positions = sectionLines(whole.surface, this.plane());
    return [{ between: [halfNames.above, halfNames.below], positions }];
  });
  readonly rows = computed((): readonly HalfRow[] => {
    const envelope = this.envelope();
    return this.halfPieces().map((piece) => {
      const sizeMm = boxOf([piece.surface]).size;
      const fit = envelope ? fitsUpright(sizeMm, usableSpace(envelope)) : null;
      return { item: piece.item, name: piece.name, sizeMm, fit };
    });
  });
  /** Whether the plane leaves everything on one side. */
  readonly isMissing = computed(() => this.halves() !== null && this.halfPieces().length < 2);
  /** The plane to draw; once the halves are there they show it themselves. */
  readonly drawnPlane = computed(() => (this.halfPieces().length > 0 ? null : this.plane()));

  private readonly halfPieces = computed((): readonly ScenePiece[] => {
    const halves = this.halves();
    if (!halves) return [];
    return [
      ...halfPiece(1, halfNames.above, halves.above),
      ...halfPiece(2, halfNames.below, halves.below),
    ];
  });

  async open(modelId: string): Promise<void> {
    this._model.set(null);
    this.parts.set(null);
    this._failure.set('');
    this.halves.set(null);
    try {
      const [model, envelopes, parts] = await Promise.all([
        this.models.model(modelId),
        this.models.envelopes(),
        this.files.modelView(modelId),
      ]);
      this._model.set(model);
      this._envelopes.set(envelopes);
      this.envelopeId.update((id) => id ?? envelopes[0]?.id ?? null);
      this.parts.set(parts);
      const whole = this.whole();
      if (!whole) return this._failure.set('This model has no picture to cut.');
      this.maker.setModel(whole.surface);
      await this.cut();
    } catch (error) {
      // Expected: the server refuses or cannot be reached.
      this._failure.set(sentenceFor(error));
    }
  }

  chooseEnvelope(id: string): void {
    this.envelopeId.set(id);
  }

  chooseDirection(direction: CutDirection): void {
    this._direction.set(direction);
    this.dropHalves();
  }

  setTilt(tilt: Tilt): void {
    this._tilt.set(tilt);
    this.dropHalves();
  }

  /** Moves the plane and shows where it is; `cut` makes the halves. */
  movePlane(placeMm: number): void {
    if (!Number.isFinite(placeMm)) return;
    this._placeMm.set(Math.min(Math.max(placeMm, 0), this.lengthMm()));
    this.dropHalves();
  }

  /** Cuts where the plane is now. A later cut overtakes an earlier one. */
  async cut(): Promise<void> {
    const plane = this.plane();
    this._isCutting.set(true);
    this._cutFailure.set('');
    try {
      const halves = await this.maker.cut(plane);
      if (!halves || this.plane() !== plane) return;
      this.halves.set(halves);
      this._isCutting.set(false);
    } catch {
      // Expected: CutFailed, on surfaces that the preview engine cannot follow.
      this._isCutting.set(false);
      this._cutFailure.set('The preview could not cut here. Move the plane a little.');
    }
  }

  /** The plane has moved: what was cut, or is being cut, is of another place. */
  private dropHalves(): void {
    this.halves.set(null);
    this._isCutting.set(false);
    this._cutFailure.set('');
  }
}

function halfPiece(item: number, name: string, surface: HalfSurface | null): ScenePiece[] {
  if (!surface) return [];
  const { min, size } = boxOf([{ name, ...surface }]);
  return [
    {
      item,
      name,
      surface: { name, ...surface },
      centreMm: [min[0] + size[0] / 2, min[1] + size[1] / 2, min[2] + size[2] / 2],
      placement: null,
    },
  ];
}
