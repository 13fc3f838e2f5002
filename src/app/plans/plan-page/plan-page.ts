import {
  ChangeDetectionStrategy,
  Component,
  DOCUMENT,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
  viewChild,
} from '@angular/core';
import { MatButton, MatIconButton } from '@angular/material/button';
import { MatDialog } from '@angular/material/dialog';
import { MatIcon } from '@angular/material/icon';
import { MatMenu, MatMenuItem, MatMenuTrigger } from '@angular/material/menu';
import { MatProgressBar } from '@angular/material/progress-bar';
import { Router, RouterLink } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import { type OrientationWish } from '../../../../shared/jobs/recipe.js';
import { SessionStore } from '../../core/auth/session-store';
import { FailureNotes } from '../../core/errors/failure-notes';
import { PageTitle } from '../../core/layout/page-title';
import { Confirmations } from '../../ui/confirm-dialog/confirmations';
import { writeBytes, writeMoment } from '../../ui/format/quantities';
import { JobProgress } from '../../ui/job-progress/job-progress';
import { Notice } from '../../ui/notice/notice';
import { TitleBlock, type TitleBlockField } from '../../ui/title-block/title-block';
import { Viewer } from '../../viewer/viewer';
import { CutsList } from '../cuts-list/cuts-list';
import { GlueUp } from '../glue-up/glue-up';
import { JointForm } from '../joint-form/joint-form';
import { JointsList } from '../joints-list/joints-list';
import { OffersTable } from '../offers-table/offers-table';
import { PartsList } from '../parts-list/parts-list';
import { boundsSentence, envelopeInWords, listCuts, scaleInWords } from '../plan-sentences';
import { PieceSheet } from '../piece-sheet/piece-sheet';
import { PlanStore } from '../plan-store';
import { PlansApi } from '../plans-api';
import { ProofTable } from '../proof-table/proof-table';
import { ReleaseDialog } from '../release-dialog/release-dialog';
import { SeamsList } from '../seams-list/seams-list';
import { wishesInWords } from '../../ui/wishes/wishes-words';
import { ViewControls } from '../view-controls/view-controls';

/** A plan as a sheet: picture, parts list, seams, cuts, proof, title block, and the way to its files. */
@Component({
  selector: 'sw-plan-page',
  imports: [
    CutsList,
    GlueUp,
    JobProgress,
    JointForm,
    JointsList,
    MatButton,
    MatIcon,
    MatIconButton,
    MatMenu,
    MatMenuItem,
    MatMenuTrigger,
    MatProgressBar,
    Notice,
    OffersTable,
    PartsList,
    PieceSheet,
    ProofTable,
    RouterLink,
    SeamsList,
    TitleBlock,
    ViewControls,
    Viewer,
  ],
  templateUrl: './plan-page.html',
  styleUrl: './plan-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PlanPage {
  private readonly document = inject(DOCUMENT);
  private readonly router = inject(Router);
  private readonly session = inject(SessionStore);
  private readonly confirmations = inject(Confirmations);
  private readonly notes = inject(FailureNotes);
  private readonly pageTitle = inject(PageTitle);
  private readonly api = inject(PlansApi);
  private readonly dialog = inject(MatDialog);
  protected readonly store = inject(PlanStore);

  /** From the address. */
  readonly planId = input.required<string>();

  private readonly viewer = viewChild(Viewer);

  protected readonly plan = this.store.plan;
  protected readonly result = this.store.result;
  protected readonly name = computed(() => {
    const plan = this.plan();
    return plan ? `${plan.modelName}, plan ${plan.number}` : 'Plan';
  });
  protected readonly isWaiting = computed(() => {
    const state = this.store.job()?.state;
    return state === 'queued' || state === 'running';
  });
  protected readonly hasStopped = computed(() => {
    const state = this.store.job()?.state;
    return state === 'failed' || state === 'cancelled';
  });
  protected readonly isRefused = computed(() => this.store.job()?.error?.code === 'refused');
  protected readonly canWrite = computed(() => this.session.can('plan.write'));
  protected readonly canCancel = computed(() => this.session.can('job.cancel'));
  protected readonly bounds = computed(() => {
    const result = this.result();
    return result ? boundsSentence(result.pieces.length, result.bounds) : '';
  });
  protected readonly isWhole = computed(() => this.store.pieces().length === 1);
  protected readonly cuts = computed(() => {
    const result = this.result();
    return result ? listCuts(result.recipe.tree) : [];
  });
  protected readonly archive = computed(() => {
    const result = this.result();
    if (!result) return null;
    const mustAsk = this.store.failedChecks() > 0 && !this.plan()?.release;
    return {
      url: this.api.downloadUrl(this.planId()),
      size: writeBytes(result.archiveBytes),
      mustAsk,
    };
  });
  protected readonly known = computed((): TitleBlockField[] => {
    const plan = this.plan();
    if (!plan) return [];
    return [
      { name: 'Title', value: plan.modelName, wide: true },
      { name: 'Number', value: `Plan ${plan.number}` },
      { name: 'Revision', value: String(plan.revisionNumber) },
      { name: 'Date', value: writeMoment(plan.createdAt) },
      { name: 'Made by', value: plan.createdBy },
      { name: 'Approved by', value: '—' },
      { name: 'Seed', value: String(plan.seed) },
      ...this.scaleField(),
      {
        name: plan.otherEnvelopes.length > 0 ? 'Envelopes' : 'Envelope',
        value: [plan.envelope, ...plan.otherEnvelopes].map(envelopeInWords).join('; '),
        wide: true,
      },
      ...this.materialField(),
      { name: 'Asked for', value: wishesInWords(plan.wishes), wide: true },
      ...(plan.fromPlan === null
        ? []
        : [{ name: 'Found by', value: `the search of plan ${plan.fromPlan}`, wide: true }]),
    ];
  });
  protected readonly hasJoints = computed(
    () => this.result()?.seams.some((seam) => seam.joint !== null) ?? false,
  );
  protected readonly isMaking = signal(false);
  /** Names to say where a piece goes; empty with one envelope. */
  protected readonly envelopeNames = computed(() => {
    const plan = this.plan();
    if (!plan || plan.otherEnvelopes.length === 0) return [];
    return [plan.envelope, ...plan.otherEnvelopes].map((envelope) => envelope.name);
  });
  protected readonly description = computed(() => {
    const count = this.store.pieces().length;
    const pieces = count === 1 ? 'one piece' : `${count} pieces`;
    return `Picture of the plan in ${pieces}. The parts list on this page says the same in numbers.`;
  });

  constructor() {
    effect(() => {
      const id = this.planId();
      untracked(() => void this.store.open(id));
    });
    effect(() => this.pageTitle.set(this.name()));
  }

  protected fit(): void {
    this.viewer()?.fit();
  }

  /** The fragment alone would lose the address's query; the table is brought into view by hand. */
  protected goToProof(event: Event): void {
    event.preventDefault();
    const proof = this.document.getElementById('proof');
    proof?.scrollIntoView();
    proof?.focus({ preventScroll: true });
  }

  protected async cancel(): Promise<void> {
    await this.tell(() => this.store.cancel());
  }

  protected async takeBest(): Promise<void> {
    await this.tell(() => this.store.takeBest());
  }

  protected async makeOffer(offer: number): Promise<void> {
    this.isMaking.set(true);
    await this.tell(async () => {
      const id = await this.store.makeOffer(offer);
      await this.router.navigate(['/plans', id]);
    });
    this.isMaking.set(false);
  }

  protected async remake(changes: Parameters<PlanStore['remake']>[0]): Promise<void> {
    this.isMaking.set(true);
    await this.tell(async () => {
      const id = await this.store.remake(changes);
      await this.router.navigate(['/plans', id]);
    });
    this.isMaking.set(false);
  }

  protected async lie(wish: OrientationWish): Promise<void> {
    const others = this.result()?.recipe.orientations ?? [];
    const orientations = [...others.filter(({ piece }) => piece !== wish.piece), wish];
    await this.remake({ orientations });
  }

  protected async skin(piece: string): Promise<void> {
    const joints = this.result()?.recipe.joints;
    if (joints) await this.remake({ joints: { ...joints, skins: [...joints.skins, piece] } });
  }

  /** Asks why, records it, then lets the browser fetch the files. */
  protected async downloadAnyway(): Promise<void> {
    const open = this.dialog.open<ReleaseDialog, void, string>(ReleaseDialog, { maxWidth: 520 });
    const reason = await firstValueFrom(open.afterClosed(), { defaultValue: undefined });
    if (!reason) return;
    await this.tell(async () => {
      await this.store.release(reason);
      this.document.location.assign(this.api.downloadUrl(this.planId()));
    });
  }

  protected async makeAgain(): Promise<void> {
    await this.tell(async () => {
      const id = await this.store.makeAgain();
      await this.router.navigate(['/plans', id]);
    });
  }

  protected async remove(): Promise<void> {
    const plan = this.plan();
    if (!plan) return;
    const isSure = await this.confirmations.ask({
      title: `Remove plan ${plan.number}?`,
      sentence: `Plan ${plan.number} of ${plan.modelName} and its files are deleted for everyone in the workshop. The model stays.`,
      action: 'Remove',
    });
    if (!isSure) return;
    await this.tell(async () => {
      await this.store.remove();
      await this.router.navigate(['/models', plan.modelId]);
    });
  }

  /** Goes through with something; a failure is told in words and nothing else happens. */
  private async tell(action: () => Promise<void>): Promise<void> {
    try {
      await action();
    } catch (error) {
      // Expected: the server refuses or cannot be reached.
      this.notes.show(error);
    }
  }

  private materialField(): TitleBlockField[] {
    const material = this.result()?.recipe.material;
    return material ? [{ name: 'Material', value: material.name, wide: true }] : [];
  }

  private scaleField(): TitleBlockField[] {
    const result = this.result();
    if (!result) return [];
    return [{ name: 'Scale', value: scaleInWords(result.recipe.millimetresPerUnit), wide: true }];
  }
}
