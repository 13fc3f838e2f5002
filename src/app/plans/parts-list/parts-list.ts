import {
  ChangeDetectionStrategy,
  Component,
  ElementRef,
  computed,
  effect,
  inject,
  input,
  output,
} from '@angular/core';
import { MatIcon } from '@angular/material/icon';
import { type Piece } from '../../../../shared/jobs/plan-make.js';
import { writeSizeMm, writeVolume } from '../../ui/format/quantities';

const steps: Readonly<Record<string, number>> = { ArrowDown: 1, ArrowUp: -1 };

/**
 * The parts list of a sheet. Items are numbered as the balloons in the picture; choosing a row
 * chooses the piece. One row takes part in the tab order, the arrow keys go through the others.
 */
@Component({
  selector: 'sw-parts-list',
  imports: [MatIcon],
  templateUrl: './parts-list.html',
  styleUrl: './parts-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PartsList {
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;

  readonly pieces = input.required<readonly Piece[]>();
  /** Names of the envelopes when there are several; empty otherwise. */
  readonly envelopes = input<readonly string[]>([]);
  readonly selected = input<string | null>(null);
  readonly pieceSelected = output<string | null>();

  protected readonly rows = computed(() =>
    this.pieces().map((piece) => ({
      item: piece.item,
      name: piece.name,
      size: writeSizeMm(piece.sizeMm),
      volume: writeVolume(piece.volumeMm3),
      support: writeVolume(piece.supportMm3),
      envelope: this.envelopes()[piece.space] ?? '',
      fits: piece.fits,
    })),
  );
  /** The row in the tab order: the selected one, or the first. */
  protected readonly entry = computed(() => this.selected() ?? this.pieces()[0]?.name ?? null);

  constructor() {
    // A piece chosen in the picture may have its row out of sight in the scrolling list.
    effect(() => {
      const name = this.selected();
      if (name) queueMicrotask(() => this.button(name)?.scrollIntoView?.({ block: 'nearest' }));
    });
  }

  protected toggle(name: string): void {
    this.pieceSelected.emit(name === this.selected() ? null : name);
  }

  protected moveByKey(event: KeyboardEvent, index: number): void {
    const last = this.pieces().length - 1;
    const step = steps[event.key];
    let to: number;
    if (step !== undefined) to = index + step;
    else if (event.key === 'Home') to = 0;
    else if (event.key === 'End') to = last;
    else return;
    event.preventDefault();
    const piece = this.pieces()[Math.min(Math.max(to, 0), last)];
    if (!piece) return;
    this.pieceSelected.emit(piece.name);
    this.button(piece.name)?.focus();
  }

  private button(name: string): HTMLButtonElement | null {
    const buttons = this.host.querySelectorAll<HTMLButtonElement>('button[data-piece]');
    return [...buttons].find((button) => button.dataset['piece'] === name) ?? null;
  }
}
