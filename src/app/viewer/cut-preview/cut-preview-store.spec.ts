import { TestBed } from '@angular/core/testing';
import { BoxGeometry } from 'three';
import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { ApiFailure } from '../../core/http/api-failure';
import { ViewFiles } from '../view-files';
import { ViewerModelsApi } from '../viewer-models-api';
import { HalvesCutter, type CutHalves, type HalfSurface } from './cut-halves';
import { CutPreviewStore } from './cut-preview-store';
import { CutFailed, HalvesMaker } from './halves-maker';

const envelope: EnvelopeResponse = {
  id: 'e'.repeat(20),
  name: 'Bench cube',
  updatedAt: '2031-03-04T12:00:00.000Z',
  shape: 'rectangular',
  widthMm: 220,
  depthMm: 220,
  heightMm: 250,
  marginMm: 0,
  nozzleMm: 0.4,
  layerHeightMm: 0.2,
};

/** A box of 30 × 10 × 10 in the file that is to be 300 × 100 × 100 mm. */
function boxView() {
  const geometry = new BoxGeometry(30, 10, 10);
  const positions = Float32Array.from(geometry.getAttribute('position').array);
  const indices = Uint32Array.from(geometry.index!.array);
  return { surfaces: [{ name: 'model', positions, indices }], lines: [] };
}

/** Cuts at once, on the test's own thread. */
class CutterAtOnce {
  private cutter: HalvesCutter | null = null;
  setModel(surface: HalfSurface): void {
    this.cutter = new HalvesCutter(surface);
  }
  cut = vi.fn(async (plane: Parameters<HalvesCutter['cut']>[0]): Promise<CutHalves | null> =>
    this.cutter!.cut(plane),
  );
}

function setUp() {
  const model = { name: 'Beam', revision: { sizeMm: [300, 100, 100] } };
  const models = { model: vi.fn(async () => model), envelopes: async () => [envelope] };
  const maker = new CutterAtOnce();
  TestBed.configureTestingModule({
    providers: [
      CutPreviewStore,
      { provide: ViewerModelsApi, useValue: models },
      { provide: ViewFiles, useValue: { modelView: async () => boxView() } },
      { provide: HalvesMaker, useValue: maker },
    ],
  });
  return { store: TestBed.inject(CutPreviewStore), models, maker };
}

describe('CutPreviewStore', () => {
  it('cuts the scaled model in the middle of x at first and says sizes and fit', async () => {
    const { store } = setUp();
    await store.open('m');
    expect(store.lengthMm()).toBeCloseTo(300, 3);
    expect(store.placeMm()).toBeCloseTo(150, 3);
    const rows = store.rows();
    expect(rows.map(({ name }) => name)).toEqual(['High half', 'Low half']);
    for (const { sizeMm, fit } of rows) {
      expect(sizeMm[0]).toBeCloseTo(150, 3);
      expect(fit).toEqual({ fits: true, reason: '' });
    }
    expect(store.seams()[0]!.positions.length).toBeGreaterThan(0);
    expect(store.drawnPlane()).toBeNull();
  });

  it('shows the plane while it is moved and the halves after the cut', async () => {
    const { store } = setUp();
    await store.open('m');
    store.movePlane(50);
    expect(store.rows()).toEqual([]);
    expect(store.drawnPlane()!.offsetMm).toBeCloseTo(-150 + 50, 3);
    expect(store.pieces()).toHaveLength(1);
    await store.cut();
    const [high, low] = store.rows();
    expect(high!.sizeMm[0]).toBeCloseTo(250, 3);
    expect(high!.fit?.fits).toBe(false);
    expect(low!.sizeMm[0]).toBeCloseTo(50, 3);
  });

  it('keeps the plane on the model and ignores what is no number', async () => {
    const { store } = setUp();
    await store.open('m');
    store.movePlane(1e9);
    expect(store.placeMm()).toBeCloseTo(300, 3);
    store.movePlane(NaN);
    expect(store.placeMm()).toBeCloseTo(300, 3);
    store.movePlane(-5);
    expect(store.placeMm()).toBe(0);
  });

  it('starts a new direction in the middle', async () => {
    const { store } = setUp();
    await store.open('m');
    store.chooseDirection('z');
    expect(store.lengthMm()).toBeCloseTo(100, 3);
    expect(store.placeMm()).toBeCloseTo(50, 3);
    store.chooseDirection('tilted');
    expect(store.lengthMm()).toBeGreaterThan(100);
  });

  it('drops halves of a plane that has been moved on meanwhile', async () => {
    const { store, maker } = setUp();
    await store.open('m');
    let answer: (halves: CutHalves) => void = () => undefined;
    maker.cut.mockImplementationOnce(() => new Promise((resolve) => (answer = resolve)));
    const cut = store.cut();
    store.movePlane(20);
    answer({ above: null, below: null });
    await cut;
    expect(store.isMissing()).toBe(false);
    expect(store.drawnPlane()).not.toBeNull();
  });

  it('says it in words when the preview cannot cut', async () => {
    const { store, maker } = setUp();
    await store.open('m');
    maker.cut.mockRejectedValueOnce(new CutFailed());
    await store.cut();
    expect(store.cutFailure()).toContain('could not cut here');
    expect(store.isCutting()).toBe(false);
  });

  it('says why there is nothing to cut', async () => {
    const { store, models } = setUp();
    models.model.mockRejectedValueOnce(new ApiFailure('model.notFound', 'No such model.', 404));
    await store.open('m');
    expect(store.failure()).toBe('No such model.');
  });
});
