import { ChangeDetectionStrategy, Component } from '@angular/core';

/** The product's mark: a sheet with a seam across it. Always beside the name, so it is not read out. */
@Component({
  selector: 'sw-mark',
  template: `
    <svg viewBox="4 4 24 24" aria-hidden="true">
      <path class="sheet" d="M6 6h20v20H6z" />
      <path class="seam" d="M6 20 26 11" />
    </svg>
  `,
  styles: `
    :host {
      display: inline-block;
      flex: none;
      width: 26px;
      height: 26px;
    }
    path {
      fill: none;
      stroke-width: 2.4;
    }
    .sheet {
      stroke: var(--mat-sys-primary);
    }
    .seam {
      stroke: var(--sw-seam);
      stroke-dasharray: 4 2.4;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Mark {}
