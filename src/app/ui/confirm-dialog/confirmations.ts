import { Injectable, inject } from '@angular/core';
import { MatDialog } from '@angular/material/dialog';
import { firstValueFrom } from 'rxjs';
import { ConfirmDialog, type Question } from './confirm-dialog';

/** Asks before something cannot be undone. */
@Injectable({ providedIn: 'root' })
export class Confirmations {
  private readonly dialog = inject(MatDialog);

  /** Whether the person went through with it; closing the dialog any other way is a no. */
  async ask(question: Question): Promise<boolean> {
    const open = this.dialog.open<ConfirmDialog, Question, boolean>(ConfirmDialog, {
      data: question,
      role: 'alertdialog',
      maxWidth: 440,
    });
    return (await firstValueFrom(open.afterClosed(), { defaultValue: false })) === true;
  }
}
