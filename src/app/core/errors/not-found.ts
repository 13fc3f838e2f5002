import { ChangeDetectionStrategy, Component } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { EmptyState } from '../../ui/empty-state/empty-state';

@Component({
  selector: 'sw-not-found',
  imports: [EmptyState, MatButton, RouterLink],
  template: `
    <div class="sw-page">
      <sw-empty-state icon="explore_off" title="There is no such page" [headingLevel]="1">
        <p>The address may be old or mistyped.</p>
        <a matButton="filled" routerLink="/models">Go to the models</a>
      </sw-empty-state>
    </div>
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class NotFound {}
