import { LiveAnnouncer } from '@angular/cdk/a11y';
import { DOCUMENT, Injectable, Injector, afterNextRender, inject } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { Title } from '@angular/platform-browser';
import { NavigationEnd, Router } from '@angular/router';
import { filter, map, pairwise, startWith } from 'rxjs';

/**
 * After a change of page, moves the focus to its main heading (or main region) and says its title, so
 * that keyboard and screen reader start where the eye does. Changes of the query alone are no new page.
 */
@Injectable({ providedIn: 'root' })
export class RouteFocus {
  private readonly document = inject(DOCUMENT);
  private readonly injector = inject(Injector);
  private readonly announcer = inject(LiveAnnouncer);
  private readonly title = inject(Title);

  constructor() {
    inject(Router)
      .events.pipe(
        filter((event) => event instanceof NavigationEnd),
        map((event) => event.urlAfterRedirects.replace(/[?#].*$/, '')),
        startWith(null),
        pairwise(),
        // The first page of a visit keeps the browser's own focus at the top of the document.
        filter(([before, after]) => before !== null && before !== after),
        takeUntilDestroyed(),
      )
      .subscribe(() => afterNextRender(() => this.arrive(), { injector: this.injector }));
  }

  private arrive(): void {
    const main = this.document.querySelector<HTMLElement>('main');
    const heading = main?.querySelector<HTMLElement>('h1[tabindex="-1"]');
    (heading ?? main)?.focus({ preventScroll: true });
    void this.announcer.announce(this.title.getTitle());
  }
}
