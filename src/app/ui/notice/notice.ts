import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { MatIcon } from '@angular/material/icon';

export type NoticeKind = 'remark' | 'good' | 'caution' | 'problem';

const looks: Record<NoticeKind, { icon: string; word: string }> = {
  remark: { icon: 'info', word: 'Note' },
  good: { icon: 'check_circle', word: 'In order' },
  caution: { icon: 'warning', word: 'Caution' },
  problem: { icon: 'error', word: 'Problem' },
};

/** A remark beside the work, marked by icon and word as well as by colour. */
@Component({
  selector: 'sw-notice',
  imports: [MatIcon],
  template: `
    <mat-icon aria-hidden="true">{{ look().icon }}</mat-icon>
    <div>
      <span class="sw-unseen">{{ look().word }}: </span>
      <ng-content />
    </div>
  `,
  styles: `
    :host {
      display: grid;
      grid-template-columns: auto minmax(0, 1fr);
      gap: 12px;
      padding: 10px 14px;
      border-inline-start: 3px solid var(--mat-sys-outline);
      background: var(--mat-sys-surface-container-low);
      font: var(--mat-sys-body-medium);
    }
    :host([data-kind='good']) {
      border-color: var(--sw-passed);
    }
    :host([data-kind='good']) mat-icon {
      color: var(--sw-passed);
    }
    :host([data-kind='caution']) {
      border-color: var(--sw-seam);
    }
    :host([data-kind='caution']) mat-icon {
      color: var(--mat-sys-tertiary);
    }
    :host([data-kind='problem']) {
      border-color: var(--mat-sys-error);
    }
    :host([data-kind='problem']) mat-icon {
      color: var(--mat-sys-error);
    }
  `,
  host: { '[attr.data-kind]': 'kind()' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Notice {
  readonly kind = input<NoticeKind>('remark');
  protected readonly look = computed(() => looks[this.kind()]);
}
