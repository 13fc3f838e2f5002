import { TestBed } from '@angular/core/testing';
import { TitleBlock } from './title-block';

describe('TitleBlock', () => {
  it('pairs every name with its value', async () => {
    const fixture = TestBed.createComponent(TitleBlock);
    fixture.componentRef.setInput('fields', [
      { name: 'Title', value: 'Harbour bell cowl', wide: true },
      { name: 'Number', value: '3' },
    ]);
    await fixture.whenStable();
    const host = fixture.nativeElement as HTMLElement;
    const pairs = [...host.querySelectorAll('dl > div')].map((pair) => [
      pair.querySelector('dt')?.textContent,
      pair.querySelector('dd')?.textContent,
    ]);
    expect(pairs).toEqual([
      ['Title', 'Harbour bell cowl'],
      ['Number', '3'],
    ]);
  });
});
