import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { type Seam } from '../../../../shared/jobs/plan-make.js';
import { writeArea } from '../../ui/format/quantities';
import { writeSightMm, writeStress } from '../plan-quantities';

/** Below this, mm², square centimetres would say nothing. */
const LEAST_CM2 = 100;

/** Where pieces meet, which cut made the seam and how much of it there is to glue. */
@Component({
  selector: 'sw-seams-list',
  template: `
    <table class="sw-table" role="table">
      <caption>
        Where two pieces meet, how much there is to glue, how much of the line is in sight, and how
        the weight beyond it bends it: a planning figure, no promise of strength.
      </caption>
      <thead role="rowgroup">
        <tr role="row">
          <th role="columnheader" scope="col">Between</th>
          <th role="columnheader" scope="col" class="sw-number">Area</th>
          <th role="columnheader" scope="col" class="sw-number">In sight</th>
          <th role="columnheader" scope="col" class="sw-number">Bending</th>
          <th role="columnheader" scope="col" class="sw-number">Cut</th>
        </tr>
      </thead>
      <tbody role="rowgroup">
        @for (row of rows(); track $index) {
          <tr role="row" [class.selected]="row.isOfSelected">
            <td role="cell">{{ row.between }}</td>
            <td role="cell" class="sw-number">{{ row.area }}</td>
            <td role="cell" class="sw-number">{{ row.sight }}</td>
            <td role="cell" class="sw-number">{{ row.stress }}</td>
            <td role="cell" class="sw-number">{{ row.cut }}</td>
          </tr>
        }
      </tbody>
    </table>
  `,
  styles: `
    :host {
      display: block;
    }
    .selected td {
      font-weight: 500;
      box-shadow: inset 0 -1px 0 var(--sw-seam);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SeamsList {
  readonly seams = input.required<readonly Seam[]>();
  /** The piece whose seams stand out. */
  readonly selected = input<string | null>(null);

  protected readonly rows = computed(() =>
    this.seams().map((seam) => ({
      between: seam.between.join(' and '),
      area: seam.areaMm2 < LEAST_CM2 ? writeSmallArea(seam.areaMm2) : writeArea(seam.areaMm2),
      sight: writeSightMm(seam.visibleMm),
      stress: writeStress(seam.bendingKpa),
      cut: seam.cut,
      isOfSelected: seam.between.some((name) => name === this.selected()),
    })),
  );
}

function writeSmallArea(areaMm2: number): string {
  return `${areaMm2 < 0.1 ? '< 0.1' : areaMm2.toFixed(1)}\u202fmm²`;
}
