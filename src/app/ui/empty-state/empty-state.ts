import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import { MatIcon } from '@angular/material/icon';

/** Says that nothing is here and, through its content, what to do next. */
@Component({
  selector: 'sw-empty-state',
  imports: [MatIcon],
  template: `
    <mat-icon aria-hidden="true">{{ icon() }}</mat-icon>
    @if (headingLevel() === 1) {
      <h1 tabindex="-1">{{ title() }}</h1>
    } @else {
      <h2>{{ title() }}</h2>
    }
    <ng-content />
  `,
  styles: `
    :host {
      display: grid;
      justify-items: center;
      gap: 12px;
      padding: 48px 16px;
      text-align: center;
      color: var(--mat-sys-on-surface-variant);
      border: 1px dashed var(--mat-sys-outline-variant);
    }
    mat-icon {
      width: 40px;
      height: 40px;
      font-size: 40px;
    }
    h1,
    h2 {
      font: var(--mat-sys-title-large);
      color: var(--mat-sys-on-surface);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class EmptyState {
  readonly icon = input('draft');
  readonly title = input.required<string>();
  readonly headingLevel = input<1 | 2>(2);
}
