import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import { type NumberedCut } from '../plan-sentences';

/** Why every cut is where it is, in the order in which the cuts are made. */
@Component({
  selector: 'sw-cuts-list',
  template: `
    <ol aria-label="Cuts in order">
      @for (cut of cuts(); track cut.cut) {
        <li>
          <span class="where">{{ cut.where }}</span>
          <span>{{ cut.reason }}</span>
        </li>
      }
    </ol>
  `,
  styles: `
    :host {
      display: block;
    }
    ol {
      display: grid;
      gap: 8px;
      padding-inline-start: 28px;
      font: var(--mat-sys-body-medium);
    }
    li::marker {
      font-weight: 500;
      font-variant-numeric: tabular-nums;
      color: var(--sw-seam);
    }
    .where {
      display: block;
      color: var(--mat-sys-on-surface-variant);
      font-variant-numeric: tabular-nums;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CutsList {
  readonly cuts = input.required<readonly NumberedCut[]>();
}
