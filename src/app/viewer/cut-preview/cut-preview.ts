import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  untracked,
  viewChild,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { MatFormField, MatLabel, MatSuffix } from '@angular/material/form-field';
import { MatIcon } from '@angular/material/icon';
import { MatInput } from '@angular/material/input';
import { MatProgressBar } from '@angular/material/progress-bar';
import { MatOption, MatSelect } from '@angular/material/select';
import { MatSlider, MatSliderThumb } from '@angular/material/slider';
import { RouterLink } from '@angular/router';
import { Subject, debounceTime } from 'rxjs';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { writeCount, writeLengthMm, writeSizeMm } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { Viewer } from '../viewer';
import { cutDirections, type CutDirection, type Tilt } from './cut-direction';
import { CutPreviewStore } from './cut-preview-store';
import { HalvesMaker } from './halves-maker';

/** Keys let go of the plane at every step; the cut waits for the last one, ms. */
const RELEASE_MS = 250;
const HALVES_APART = 0.3;

const directionNames: Record<CutDirection, string> = {
  x: 'across x',
  y: 'across y',
  z: 'across z',
  tilted: 'tilted',
};

/** A plane through a model that can be moved, with both halves and whether they would fit. */
@Component({
  selector: 'sw-cut-preview',
  imports: [
    MatButton,
    MatButtonToggle,
    MatButtonToggleGroup,
    MatFormField,
    MatIcon,
    MatInput,
    MatLabel,
    MatOption,
    MatProgressBar,
    MatSelect,
    MatSlider,
    MatSliderThumb,
    MatSuffix,
    Notice,
    RouterLink,
    Viewer,
  ],
  providers: [CutPreviewStore, HalvesMaker],
  templateUrl: './cut-preview.html',
  styleUrl: './cut-preview.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CutPreview {
  protected readonly store = inject(CutPreviewStore);

  /** From the address. */
  readonly modelId = input.required<string>();

  private readonly viewer = viewChild(Viewer);
  private readonly released = new Subject<void>();

  protected readonly halvesApart = HALVES_APART;
  protected readonly directions = cutDirections.map((direction) => ({
    direction,
    name: directionNames[direction],
  }));
  protected readonly isTilted = computed(() => this.store.direction() === 'tilted');
  protected readonly place = computed(() => round(this.store.placeMm()));
  protected readonly length = computed(() => round(this.store.lengthMm()));
  protected readonly lengthWords = computed(() => writeLengthMm(this.store.lengthMm()));
  protected readonly triangles = computed(() => writeCount(this.store.triangles()));
  protected readonly rows = computed(() =>
    this.store.rows().map((row) => ({ ...row, size: writeSizeMm(row.sizeMm) })),
  );
  protected readonly description = computed(() => {
    const name = this.store.model()?.name ?? 'the model';
    return `Picture of ${name} with a cutting plane. The table on this page gives the sizes of both halves.`;
  });
  protected readonly inMm = (value: number): string => `${Math.round(value)} mm`;
  protected readonly inDegrees = (value: number): string => `${value}°`;

  constructor() {
    effect(() => {
      const id = this.modelId();
      untracked(() => void this.store.open(id));
    });
    this.released
      .pipe(debounceTime(RELEASE_MS), takeUntilDestroyed())
      .subscribe(() => void this.store.cut());
  }

  protected choose(direction: CutDirection): void {
    this.store.chooseDirection(direction);
    this.release();
  }

  protected type(placeMm: number): void {
    this.store.movePlane(placeMm);
    this.release();
  }

  protected tilt(change: Partial<Tilt>): void {
    this.store.setTilt({ ...this.store.tilt(), ...change });
  }

  /** The plane was let go: cut where it is now. */
  protected release(): void {
    this.released.next();
  }

  protected fit(): void {
    this.viewer()?.fit();
  }
}

/** Tenths of a millimetre: finer than anyone drags. */
function round(lengthMm: number): number {
  return Math.round(lengthMm * 10) / 10;
}
