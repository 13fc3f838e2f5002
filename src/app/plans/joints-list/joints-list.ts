import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { type Seam } from '../../../../shared/jobs/plan-make.js';
import { jointNames, writeRange } from '../joint-words';

/** How every seam is located and held, why so, and what goes into it. */
@Component({
  selector: 'sw-joints-list',
  template: `
    <table class="sw-table sw-table-rows" role="table">
      <caption>
        How every seam is located and held, and why so. The first pin finds the place, slots let the
        size be a little off.
      </caption>
      <thead role="rowgroup">
        <tr role="row">
          <th role="columnheader" scope="col">Between</th>
          <th role="columnheader" scope="col">Joint</th>
          <th role="columnheader" scope="col">Why</th>
          <th role="columnheader" scope="col" class="sw-number">Glue</th>
        </tr>
      </thead>
      <tbody role="rowgroup">
        @for (row of rows(); track $index) {
          <tr role="row" [class.selected]="row.isOfSelected">
            <th role="rowheader" scope="row">{{ row.between }}</th>
            <td role="cell" data-label="Joint">{{ row.kind }}</td>
            <td role="cell" data-label="Why">
              {{ row.reason }}
              @for (note of row.notes; track $index) {
                <span class="note">{{ note }}</span>
              }
            </td>
            <td role="cell" class="sw-number" data-label="Glue">{{ row.glue }}</td>
          </tr>
        }
      </tbody>
    </table>
  `,
  styles: `
    :host {
      display: block;
    }
    .selected td,
    .selected th {
      box-shadow: inset 0 -1px 0 var(--sw-seam);
    }
    .note {
      display: block;
      color: var(--mat-sys-on-surface-variant);
    }
    @media (max-width: 700px) {
      caption {
        display: block;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class JointsList {
  readonly seams = input.required<readonly Seam[]>();
  readonly selected = input<string | null>(null);

  protected readonly rows = computed(() =>
    this.seams().flatMap(({ between, joint, glueMl }) =>
      joint
        ? [
            {
              between: between.join(' and '),
              kind: jointNames[joint.kind],
              reason: joint.reason,
              notes: joint.notes,
              glue: writeRange(glueMl, 'ml'),
              isOfSelected: between.some((name) => name === this.selected()),
            },
          ]
        : [],
    ),
  );
}
