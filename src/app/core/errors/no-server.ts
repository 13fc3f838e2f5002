import { ChangeDetectionStrategy, Component } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { EmptyState } from '../../ui/empty-state/empty-state';

@Component({
  selector: 'sw-no-server',
  imports: [EmptyState, MatButton],
  template: `
    <main class="sw-page">
      <sw-empty-state icon="cloud_off" title="The server does not answer" [headingLevel]="1">
        <p>It may be starting. Wait a moment, then try again.</p>
        <button matButton="filled" type="button" (click)="tryAgain()">Try again</button>
      </sw-empty-state>
    </main>
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class NoServer {
  protected tryAgain(): void {
    location.reload();
  }
}
