import { ChangeDetectionStrategy, Component, input, signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { provideRouter } from '@angular/router';
import { Viewer } from '../viewer';
import { CutPreview } from './cut-preview';
import { CutPreviewStore } from './cut-preview-store';
import { HalvesMaker } from './halves-maker';

/** Stands for the picture, which needs a graphics card. */
@Component({
  selector: 'sw-viewer',
  template: '',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
class ViewerDouble {
  readonly pieces = input();
  readonly seams = input();
  readonly spread = input();
  readonly cutPlane = input();
  readonly description = input();
}

async function setUp() {
  const store = {
    model: signal({ name: 'Beam' }),
    envelopes: signal([]),
    envelope: signal(null),
    failure: signal(''),
    direction: signal('x'),
    tilt: signal({ leanDegrees: 30, turnDegrees: 0 }),
    isCutting: signal(false),
    cutFailure: signal(''),
    whole: signal({}),
    triangles: signal(1_234),
    lengthMm: signal(300),
    placeMm: signal(150),
    pieces: signal([]),
    seams: signal([]),
    drawnPlane: signal(null),
    isMissing: signal(false),
    rows: signal([
      {
        item: 1,
        name: 'High half',
        sizeMm: [100, 50, 25],
        fit: { fits: false, reason: '3 mm too tall' },
      },
    ]),
    open: vi.fn(async () => undefined),
    cut: vi.fn(async () => undefined),
    movePlane: vi.fn((placeMm: number) => store.placeMm.set(placeMm)),
    setTilt: vi.fn(),
    chooseDirection: vi.fn(),
    chooseEnvelope: vi.fn(),
  };
  TestBed.configureTestingModule({ providers: [provideRouter([])] });
  TestBed.overrideComponent(CutPreview, {
    remove: { imports: [Viewer], providers: [CutPreviewStore, HalvesMaker] },
    add: {
      imports: [ViewerDouble],
      providers: [{ provide: CutPreviewStore, useValue: store }],
    },
  });
  const fixture = TestBed.createComponent(CutPreview);
  fixture.componentRef.setInput('modelId', 'm');
  await fixture.whenStable();
  const page = fixture.nativeElement as HTMLElement;
  const slider = page.querySelector<HTMLInputElement>('input[type=range]')!;
  const send = (target: HTMLInputElement, value: string, type: 'input' | 'change') => {
    target.value = value;
    target.dispatchEvent(new Event(type, { bubbles: true }));
  };
  return { page, store, slider, send };
}

describe('CutPreview', () => {
  it('says that it is a preview, on how many triangles, and how each half fits', async () => {
    const { page, store } = await setUp();
    expect(store.open).toHaveBeenCalledWith('m');
    expect(page.textContent).toMatch(/preview on the picture's mesh of 1.234 triangles/);
    expect(page.textContent).toContain('1 High half');
    expect(page.textContent).toContain('no, 3 mm too tall');
  });

  it('moves the plane while the slider is dragged and cuts once after it was let go', async () => {
    const { store, slider, send } = await setUp();
    send(slider, '80', 'input');
    send(slider, '90', 'input');
    expect(store.movePlane).toHaveBeenLastCalledWith(90);
    await new Promise((resolve) => setTimeout(resolve, 400));
    expect(store.cut).not.toHaveBeenCalled();
    send(slider, '90', 'change');
    send(slider, '91', 'change');
    await vi.waitFor(() => expect(store.cut).toHaveBeenCalledTimes(1));
  });

  it('takes a typed place', async () => {
    const { page, store, send } = await setUp();
    send(page.querySelector<HTMLInputElement>('input[type=number]')!, '12.5', 'change');
    expect(store.movePlane).toHaveBeenCalledWith(12.5);
    await vi.waitFor(() => expect(store.cut).toHaveBeenCalledTimes(1));
  });

  it('says that the plane misses', async () => {
    const { page, store } = await setUp();
    store.isMissing.set(true);
    await vi.waitFor(() => expect(page.textContent).toContain('The plane misses the model'));
  });
});
