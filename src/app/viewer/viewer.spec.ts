import { TestBed } from '@angular/core/testing';
import { Viewer } from './viewer';

describe('Viewer', () => {
  // jsdom draws nothing, as a browser without WebGL: the page has to say so and stay of use.
  it('says that there is no WebGL, that the numbers hold, and hides the empty canvas', async () => {
    const getContext = vi.spyOn(HTMLCanvasElement.prototype, 'getContext').mockReturnValue(null);
    const fixture = TestBed.createComponent(Viewer);
    fixture.componentRef.setInput('pieces', []);
    fixture.componentRef.setInput('description', 'Picture of a bell.');
    await fixture.whenStable();
    const page = fixture.nativeElement as HTMLElement;
    await vi.waitFor(() => expect(page.textContent).toContain('WebGL 2 is missing'), 20_000);
    expect(page.textContent).toContain('All numbers on this page hold without it.');
    expect(page.querySelector('canvas')!.hidden).toBe(true);
    expect(page.querySelector('.sw-viewer-hint')).toBeNull();
    expect(page.dataset['drawn']).toBeUndefined();
    getContext.mockRestore();
  });

  it('names the canvas by what it shows and where the numbers are', async () => {
    vi.spyOn(HTMLCanvasElement.prototype, 'getContext').mockReturnValue(null);
    const fixture = TestBed.createComponent(Viewer);
    fixture.componentRef.setInput('pieces', []);
    fixture.componentRef.setInput('description', 'Picture of a bell. The table says the same.');
    fixture.detectChanges();
    const canvas = (fixture.nativeElement as HTMLElement).querySelector('canvas')!;
    expect(canvas.getAttribute('aria-label')).toBe('Picture of a bell. The table says the same.');
    expect(canvas.tabIndex).toBe(0);
  });
});
