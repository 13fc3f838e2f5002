import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { MatButton, MatIconButton } from '@angular/material/button';
import { MatIcon } from '@angular/material/icon';
import { MatProgressBar } from '@angular/material/progress-bar';
import { RouterLink } from '@angular/router';
import { writeBytes } from '../../ui/format/quantities';
import { type Upload } from '../upload-queue';

/** The files on their way: how far each is, what was refused and why, with the way out of each. */
@Component({
  selector: 'sw-upload-list',
  imports: [MatButton, MatIcon, MatIconButton, MatProgressBar, RouterLink],
  templateUrl: './upload-list.html',
  styleUrl: './upload-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class UploadList {
  readonly uploads = input.required<readonly Upload[]>();
  readonly cancelAsked = output<number>();
  readonly againAsked = output<number>();
  readonly dismissed = output<number>();
  readonly finishedDismissed = output<void>();

  protected readonly hasSeveralFinished = computed(
    () => this.lines().filter((line) => !line.isOnItsWay).length > 1,
  );
  protected readonly lines = computed(() =>
    this.uploads().map((upload) => ({
      ...upload,
      percent: Math.floor(upload.fraction * 100),
      isOnItsWay: ['waiting', 'sending', 'storing'].includes(upload.state),
      words: inWords(upload),
    })),
  );
}

function inWords(upload: Upload): string {
  const size = writeBytes(upload.file.size);
  switch (upload.state) {
    case 'waiting':
      return `${size}, waiting its turn`;
    case 'sending':
      return `${Math.floor(upload.fraction * 100)} % of ${size} sent`;
    case 'storing':
      return `${size} sent, being stored`;
    case 'done':
      return `${size} stored; the inspection follows by itself`;
    case 'cancelled':
      return 'Cancelled; nothing was kept';
    case 'refused':
      return upload.problem;
  }
}
