import { LiveAnnouncer } from '@angular/cdk/a11y';
import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { Router, RouterOutlet, TitleStrategy, provideRouter } from '@angular/router';
import { PageTitle } from './page-title';
import { RouteFocus } from './route-focus';

@Component({
  selector: 'sw-first',
  template: '<h1 tabindex="-1">First</h1>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
class First {}

@Component({
  selector: 'sw-second',
  template: '<h1 tabindex="-1">Second</h1>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
class Second {}

@Component({
  selector: 'sw-frame',
  imports: [RouterOutlet],
  template: '<main tabindex="-1"><router-outlet /></main>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
class Frame {}

describe('RouteFocus', () => {
  it('moves the focus to the heading of a new page and says its title, not for a new query', async () => {
    const announce = vi.fn(() => Promise.resolve());
    TestBed.configureTestingModule({
      providers: [
        provideRouter([
          { path: 'first', title: 'First', component: First },
          { path: 'second', title: 'Second', component: Second },
        ]),
        { provide: TitleStrategy, useExisting: PageTitle },
        { provide: LiveAnnouncer, useValue: { announce } },
      ],
    });
    const frame = TestBed.createComponent(Frame);
    document.body.append(frame.nativeElement as HTMLElement);
    TestBed.inject(RouteFocus);
    const router = TestBed.inject(Router);

    await router.navigateByUrl('/first');
    await frame.whenStable();
    expect(announce).not.toHaveBeenCalled();

    await router.navigateByUrl('/second');
    await frame.whenStable();
    expect(document.activeElement?.textContent).toBe('Second');
    expect(announce).toHaveBeenCalledWith('Second · Seamwright');

    (document.activeElement as HTMLElement).blur();
    await router.navigateByUrl('/second?q=bell');
    await frame.whenStable();
    expect(document.activeElement).toBe(document.body);
    expect(announce).toHaveBeenCalledTimes(1);
    frame.destroy();
  });
});
