import { LiveAnnouncer } from '@angular/cdk/a11y';
import {
  ChangeDetectionStrategy,
  Component,
  computed,
  inject,
  viewChild,
  type ElementRef,
} from '@angular/core';
import { MatButton, MatIconButton } from '@angular/material/button';
import { MatIcon } from '@angular/material/icon';
import { MatProgressBar } from '@angular/material/progress-bar';
import { RouterLink } from '@angular/router';
import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { SessionStore } from '../../core/auth/session-store';
import { FailureNotes } from '../../core/errors/failure-notes';
import { Confirmations } from '../../ui/confirm-dialog/confirmations';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { writeGivenMm, writeMoment } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { bedInWords, usableBedInWords } from '../envelope-words';
import { EnvelopesStore } from '../envelopes-store';

/** Every build volume of the workshop, as one compact table. */
@Component({
  selector: 'sw-envelope-list',
  imports: [EmptyState, MatButton, MatIcon, MatIconButton, MatProgressBar, Notice, RouterLink],
  templateUrl: './envelope-list.html',
  styleUrl: './envelope-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class EnvelopeList {
  private readonly store = inject(EnvelopesStore);
  private readonly sessions = inject(SessionStore);
  private readonly confirmations = inject(Confirmations);
  private readonly notes = inject(FailureNotes);
  private readonly announcer = inject(LiveAnnouncer);

  private readonly heading = viewChild.required<ElementRef<HTMLElement>>('heading');

  protected readonly problem = this.store.problem;
  protected readonly isEmpty = this.store.isEmpty;
  protected readonly mayWrite = computed(() => this.sessions.can('envelope.write'));
  protected readonly rows = computed(
    () =>
      this.store.envelopes()?.map((envelope) => ({
        envelope,
        bed: bedInWords(envelope),
        usableBed: usableBedInWords(envelope),
        height: writeGivenMm(envelope.heightMm),
        margin: writeGivenMm(envelope.marginMm),
        nozzle: writeGivenMm(envelope.nozzleMm),
        layers: writeGivenMm(envelope.layerHeightMm),
        updatedAt: writeMoment(envelope.updatedAt),
      })) ?? null,
  );

  constructor() {
    void this.store.load();
  }

  protected async load(): Promise<void> {
    await this.store.load();
  }

  protected async remove(envelope: EnvelopeResponse): Promise<void> {
    const isSure = await this.confirmations.ask({
      title: `Remove ${envelope.name}?`,
      sentence: 'Plans that were made for it keep their own copy of its size. No plan is lost.',
      action: 'Remove',
    });
    if (!isSure) return;
    try {
      await this.store.remove(envelope.id);
      // The button that had the focus is gone with its row.
      this.heading().nativeElement.focus();
      await this.announcer.announce(`${envelope.name} is removed.`);
    } catch (failure) {
      // Expected: it was removed elsewhere, or the role changed meanwhile.
      this.notes.show(failure);
      await this.store.load();
    }
  }
}
