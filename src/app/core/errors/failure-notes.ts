import { Injectable, inject } from '@angular/core';
import { MatSnackBar } from '@angular/material/snack-bar';
import { sentenceFor } from '../http/api-failure';

/** Tells the person about a failure that has no place of its own on the page. */
@Injectable({ providedIn: 'root' })
export class FailureNotes {
  private readonly snackBar = inject(MatSnackBar);

  show(error: unknown): void {
    this.say(sentenceFor(error));
  }

  say(sentence: string): void {
    this.snackBar.open(sentence, 'Close', { duration: 12_000, politeness: 'assertive' });
  }
}
