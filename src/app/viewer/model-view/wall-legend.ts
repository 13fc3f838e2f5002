import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { writeLengthMm } from '../../ui/format/quantities';
import { cividisGradient } from '../scene/cividis';

/** The colours of wall thickness with their numbers. */
@Component({
  selector: 'sw-wall-legend',
  template: `
    <span>0 mm</span>
    <span class="scale" aria-hidden="true" [style.background]="gradient"></span>
    <span>{{ end() }} and more</span>
    <span class="sw-unseen">Dark is thin, bright is thick.</span>
  `,
  styles: `
    :host {
      display: flex;
      align-items: center;
      gap: 8px;
      font: var(--mat-sys-label-medium);
      font-variant-numeric: tabular-nums;
    }

    .scale {
      width: 120px;
      height: 10px;
      border: var(--sw-rule);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class WallLegend {
  readonly endMm = input.required<number>();

  protected readonly gradient = cividisGradient;
  protected readonly end = computed(() => writeLengthMm(this.endMm()));
}
