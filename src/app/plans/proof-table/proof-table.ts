import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import { MatIcon } from '@angular/material/icon';
import { type ProofRow } from '../../../../shared/jobs/plan-make.js';

/** The checks a plan was measured against, on the very bytes that are downloaded. */
@Component({
  selector: 'sw-proof-table',
  imports: [MatIcon],
  template: `
    <table class="sw-table sw-table-rows" role="table">
      <caption>
        Measured on the files that you download.
      </caption>
      <thead role="rowgroup">
        <tr role="row">
          <th role="columnheader" scope="col">Check</th>
          <th role="columnheader" scope="col">Measured</th>
          <th role="columnheader" scope="col">Limit</th>
          <th role="columnheader" scope="col">Result</th>
        </tr>
      </thead>
      <tbody role="rowgroup">
        @for (row of rows(); track $index) {
          <tr role="row">
            <th role="rowheader" scope="row">{{ row.check }}</th>
            <td role="cell" data-label="Measured">{{ row.measured }}</td>
            <td role="cell" data-label="Limit">{{ row.limit }}</td>
            <td role="cell" data-label="Result">
              <span class="result" [class.failed]="!row.passed">
                <mat-icon aria-hidden="true">{{ row.passed ? 'check_circle' : 'error' }}</mat-icon>
                {{ row.passed ? 'passed' : 'failed' }}
              </span>
            </td>
          </tr>
        }
      </tbody>
    </table>
  `,
  styles: `
    :host {
      display: block;
    }
    /* A caption in a table that is no table any more would be as narrow as a letter. */
    @media (max-width: 700px) {
      caption {
        display: block;
      }
    }
    td,
    th {
      vertical-align: middle;
    }
    .result {
      display: inline-flex;
      align-items: center;
      gap: 4px;
      color: var(--sw-passed);
      white-space: nowrap;
    }
    .failed {
      color: var(--sw-failed);
      font-weight: 500;
    }
    mat-icon {
      width: 18px;
      height: 18px;
      font-size: 18px;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ProofTable {
  readonly rows = input.required<readonly ProofRow[]>();
}
