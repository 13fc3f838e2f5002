import {
  ChangeDetectionStrategy,
  Component,
  DestroyRef,
  ElementRef,
  ViewEncapsulation,
  afterNextRender,
  afterRenderEffect,
  computed,
  effect,
  inject,
  input,
  output,
  signal,
  viewChild,
} from '@angular/core';
import { type BuildSpace } from '../../../shared/geometry/fitting/build-space.js';
import { ThemeStore } from '../core/layout/theme-store';
import { Notice } from '../ui/notice/notice';
import { type CameraMove } from './scene/camera-rig';
import { type CutPlane } from './scene/cut-plane-layer';
import { type SceneView } from './scene/piece-stage';
import { type ScenePiece, type SceneSeam } from './scene/view-parts';
import { type SceneMeasure, type ScenePlace, type ViewerScene } from './scene/viewer-scene';
import { lengthLabel } from './scene/scale-steps';
import { readSheetColours } from './sheet-colours';

const cameraKeys: Readonly<Record<string, CameraMove>> = {
  ArrowLeft: 'left',
  ArrowRight: 'right',
  ArrowUp: 'up',
  ArrowDown: 'down',
  '+': 'closer',
  '=': 'closer',
  '-': 'farther',
  _: 'farther',
};

let nextId = 0;

/**
 * A picture of pieces on paper that can be turned. Everything it shows is also said in numbers by
 * the page around it, so a browser without WebGL loses the picture only.
 */
@Component({
  selector: 'sw-viewer',
  imports: [Notice],
  templateUrl: './viewer.html',
  styleUrl: './viewer.scss',
  // Balloons are made by the scene, so the style sheet must reach nodes that no template made.
  encapsulation: ViewEncapsulation.None,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Viewer {
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;
  private readonly theme = inject(ThemeStore);

  readonly pieces = input.required<readonly ScenePiece[]>();
  readonly seams = input<readonly SceneSeam[]>([]);
  readonly space = input<BuildSpace | null>(null);
  readonly selected = input<string | null>(null);
  readonly view = input<SceneView>('whole');
  /** 0 assembled … 1 as far apart as it goes. */
  readonly spread = input(0);
  readonly cutPlane = input<CutPlane | null>(null);
  /** Whether the size of what is shown is written along its sides. */
  readonly hasDimensions = input(false);
  /** A place to fly to; another object flies there again. */
  readonly place = input<ScenePlace | null>(null);
  /** Where the colour scale of wall thickness ends; null draws the surface plain. */
  readonly wallsToMm = input<number | null>(null);
  /** What the picture shows and where the same is said in numbers. */
  readonly description = input.required<string>();
  readonly pieceSelected = output<string | null>();

  private readonly canvas = viewChild.required<ElementRef<HTMLCanvasElement>>('canvas');
  private readonly overlay = viewChild.required<ElementRef<SVGSVGElement>>('overlay');
  private readonly scene = signal<ViewerScene | null>(null);
  private readonly measure = signal<SceneMeasure | null>(null);
  private sizeObserver: ResizeObserver | null = null;
  private isGone = false;

  protected readonly hintId = `sw-viewer-hint-${nextId++}`;
  /** Why there is no picture; empty while there may be one. */
  protected readonly trouble = signal('');
  protected readonly scaleBar = computed(() => {
    const measure = this.measure();
    if (!measure || this.pieces().length === 0) return null;
    return {
      widthPx: measure.bar.widthPx,
      length: lengthLabel(measure.bar.lengthMm),
      grid: lengthLabel(measure.gridMm),
      numbered: measure.numbered,
    };
  });

  constructor() {
    afterNextRender(() => void this.start());
    inject(DestroyRef).onDestroy(() => {
      this.isGone = true;
      this.sizeObserver?.disconnect();
      this.scene()?.dispose();
    });
    effect(() => this.scene()?.setSpace(this.space()));
    effect(() => this.scene()?.setDimensions(this.hasDimensions()));
    effect(() => this.scene()?.setPieces(this.pieces(), this.seams()));
    effect(() => this.scene()?.setWallShading(this.wallsToMm()));
    effect(() => this.scene()?.setPlace(this.place()));
    effect(() => this.scene()?.setSelected(this.selected()));
    effect(() => this.scene()?.setSpread(this.spread()));
    effect(() => this.scene()?.setView(this.view()));
    effect(() => this.scene()?.setCutPlane(this.cutPlane()));
    // After rendering, because the document's colour scheme is itself set by an effect.
    afterRenderEffect(() => {
      const isDark = this.theme.isDark();
      this.scene()?.setTheme(readSheetColours(this.host, isDark));
    });
  }

  /** Shows everything that is there in full. */
  fit(): void {
    this.scene()?.fit();
  }

  protected moveByKey(event: KeyboardEvent): void {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const move = cameraKeys[event.key];
    if (!move && event.key !== '0') return;
    event.preventDefault();
    if (move) this.scene()?.moveCamera(move);
    else this.fit();
  }

  private async start(): Promise<void> {
    const query = new URLSearchParams(location.search);
    const isPlain = query.get('plain') === '1';
    try {
      const { ViewerScene: Scene } = await import('./scene/viewer-scene');
      if (this.isGone) return;
      const scene = new Scene({
        canvas: this.canvas().nativeElement,
        overlay: this.overlay().nativeElement,
        antialias: !isPlain,
        prefersReducedMotion: () => matchMedia('(prefers-reduced-motion: reduce)').matches,
        onDrawn: (frames) => (this.host.dataset['drawn'] = String(frames)),
        onMeasured: (measure) => this.takeMeasure(measure),
        onPicked: (name) => this.pieceSelected.emit(name),
      });
      this.watchSize(scene, isPlain);
      this.scene.set(scene);
    } catch (error) {
      // Expected: no WebGL 2 in this browser, or the scene's code could not be fetched.
      // Its class is known by name only: the code that has it is not loaded with the page.
      const isMissing = error instanceof Error && error.name === 'WebGlMissing';
      const reason = isMissing ? error.message : 'The picture could not be started.';
      this.trouble.set(`${reason} All numbers on this page hold without it.`);
    }
  }

  private watchSize(scene: ViewerScene, isPlain: boolean): void {
    const canvas = this.canvas().nativeElement;
    const resize = () => {
      const pixelRatio = isPlain ? 1 : Math.min(devicePixelRatio, 2);
      scene.resize(canvas.clientWidth, canvas.clientHeight, pixelRatio);
    };
    this.sizeObserver = new ResizeObserver(resize);
    this.sizeObserver.observe(canvas);
    resize();
  }

  /** Every frame reports; only a change is worth a look by the template. */
  private takeMeasure(measure: SceneMeasure): void {
    const last = this.measure();
    const isSame =
      last?.bar.lengthMm === measure.bar.lengthMm &&
      last.bar.widthPx === measure.bar.widthPx &&
      last.gridMm === measure.gridMm &&
      last.numbered.shown === measure.numbered.shown &&
      last.numbered.total === measure.numbered.total;
    if (!isSame) this.measure.set(measure);
  }
}
