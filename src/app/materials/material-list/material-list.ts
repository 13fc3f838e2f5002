import { LiveAnnouncer } from '@angular/cdk/a11y';
import {
  ChangeDetectionStrategy,
  Component,
  computed,
  inject,
  signal,
  viewChild,
  type ElementRef,
} from '@angular/core';
import { MatButton, MatIconButton } from '@angular/material/button';
import { MatIcon } from '@angular/material/icon';
import { MatProgressBar } from '@angular/material/progress-bar';
import { RouterLink } from '@angular/router';
import { type MaterialResponse } from '../../../../shared/api/materials.contract.js';
import { SessionStore } from '../../core/auth/session-store';
import { FailureNotes } from '../../core/errors/failure-notes';
import { sentenceFor } from '../../core/http/api-failure';
import { Confirmations } from '../../ui/confirm-dialog/confirmations';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { writeGivenMm } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { MaterialsApi } from '../materials-api';

/** Everything the workshop prints and glues with, as one compact table. */
@Component({
  selector: 'sw-material-list',
  imports: [EmptyState, MatButton, MatIcon, MatIconButton, MatProgressBar, Notice, RouterLink],
  templateUrl: './material-list.html',
  styleUrl: './material-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MaterialList {
  private readonly api = inject(MaterialsApi);
  private readonly sessions = inject(SessionStore);
  private readonly confirmations = inject(Confirmations);
  private readonly notes = inject(FailureNotes);
  private readonly announcer = inject(LiveAnnouncer);

  private readonly heading = viewChild.required<ElementRef<HTMLElement>>('heading');
  private readonly materials = signal<readonly MaterialResponse[] | null>(null);

  protected readonly problem = signal('');
  protected readonly isEmpty = computed(() => this.materials()?.length === 0);
  protected readonly mayWrite = computed(() => this.sessions.can('material.write'));
  protected readonly rows = computed(
    () =>
      this.materials()?.map((material) => {
        const { profile } = material;
        return {
          material,
          density: `${profile.densityGPerCm3} g/cm³`,
          price: `${profile.pricePerKg} a kg`,
          overhang: `${profile.overhangDegrees}°`,
          locating: writeGivenMm(profile.clearances.locatingMm),
          shrinkage:
            `${profile.shrinkagePercent} %` + (profile.isShrinkageApplied ? ', made up for' : ''),
          glue: profile.glue.name,
        };
      }) ?? null,
  );

  constructor() {
    void this.load();
  }

  protected async load(): Promise<void> {
    this.problem.set('');
    try {
      this.materials.set(await this.api.list());
    } catch (failure) {
      // Expected without a server or a session; shown where the list would be.
      this.problem.set(sentenceFor(failure));
    }
  }

  protected async remove({ id, profile }: MaterialResponse): Promise<void> {
    const isSure = await this.confirmations.ask({
      title: `Remove ${profile.name}?`,
      sentence: 'Plans that were made with it keep their own copy. No plan is lost.',
      action: 'Remove',
    });
    if (!isSure) return;
    try {
      await this.api.remove(id);
      // The button that had the focus is gone with its row.
      this.heading().nativeElement.focus();
      await this.announcer.announce(`${profile.name} is removed.`);
    } catch (failure) {
      // Expected: it was removed elsewhere, or the role changed meanwhile.
      this.notes.show(failure);
    }
    await this.load();
  }
}
