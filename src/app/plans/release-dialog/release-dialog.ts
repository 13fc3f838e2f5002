import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import {
  MatDialogActions,
  MatDialogClose,
  MatDialogContent,
  MatDialogRef,
  MatDialogTitle,
} from '@angular/material/dialog';
import { MatFormField, MatHint, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { planReleaseRequest } from '../../../../shared/api/plans.contract.js';

/** Asks why the files of a plan are wanted although a check failed; closes with the reason. */
@Component({
  selector: 'sw-release-dialog',
  imports: [
    MatButton,
    MatDialogActions,
    MatDialogClose,
    MatDialogContent,
    MatDialogTitle,
    MatFormField,
    MatHint,
    MatInput,
    MatLabel,
  ],
  template: `
    <h2 mat-dialog-title>Download although a check failed?</h2>
    <mat-dialog-content>
      <p>
        Prints made from these files may not fit, close or go together. Your name, the time and the
        reason are kept with the plan.
      </p>
      <mat-form-field>
        <mat-label>Reason</mat-label>
        <input
          matInput
          cdkFocusInitial
          maxlength="300"
          [value]="reason()"
          (input)="reason.set($any($event.target).value)"
        />
        <mat-hint>For example: only P03 is printed, as a trial</mat-hint>
      </mat-form-field>
    </mat-dialog-content>
    <mat-dialog-actions align="end">
      <button matButton type="button" mat-dialog-close>Leave it</button>
      <button matButton="filled" type="button" [disabled]="!isGiven()" (click)="close()">
        Download anyway
      </button>
    </mat-dialog-actions>
  `,
  styles: `
    mat-form-field {
      width: 100%;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ReleaseDialog {
  private readonly dialog = inject<MatDialogRef<ReleaseDialog, string>>(MatDialogRef);
  protected readonly reason = signal('');
  protected readonly isGiven = computed(
    () => planReleaseRequest.safeParse({ reason: this.reason() }).success,
  );

  protected close(): void {
    this.dialog.close(this.reason().trim());
  }
}
