import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatIcon } from '@angular/material/icon';
import { type Offer } from '../../../../shared/jobs/plan-make.js';
import { writeCount, writeVolume } from '../../ui/format/quantities';
import { writeSightMm, writeStress } from '../plan-quantities';

/** The plans that one search found, none better than another in everything; any may be made. */
@Component({
  selector: 'sw-offers-table',
  imports: [MatButton, MatIcon],
  templateUrl: './offers-table.html',
  styleUrl: './offers-table.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class OffersTable {
  readonly offers = input.required<readonly Offer[]>();
  /** The one that this page shows. */
  readonly chosen = input.required<number | null>();
  readonly mayMake = input(false);
  readonly isMaking = input(false);
  readonly asked = output<number>();

  protected readonly rows = computed(() =>
    this.offers().map(({ bestAt, objectives }, index) => ({
      index,
      isChosen: index === this.chosen(),
      bestAt: capitalised(bestAt.join(', ')),
      pieces: writeCount(objectives.pieces),
      support: writeVolume(objectives.supportMm3),
      sight: writeSightMm(objectives.visibleSeamMm),
      stress: writeStress(objectives.weakestSeamKpa),
    })),
  );
}

function capitalised(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}
