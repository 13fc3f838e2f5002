import { TestBed } from '@angular/core/testing';
import { type ProblemPlace } from '../../../../shared/jobs/model-inspect.js';
import { PlaceList } from './place-list';

const places = Array.from({ length: 13 }, (_, i): ProblemPlace => ({
  kind: 'crossing',
  at: [i, 0, 0],
  reach: 3,
  sentence: `Surfaces cross here, ${i}.`,
}));

describe('PlaceList', () => {
  it('flies to a place, and shows ten until all are asked for', async () => {
    const fixture = TestBed.createComponent(PlaceList);
    fixture.componentRef.setInput('places', places);
    const chosen: number[] = [];
    fixture.componentInstance.placeChosen.subscribe((place) => chosen.push(place.at[0]));
    await fixture.whenStable();
    const host = fixture.nativeElement as HTMLElement;
    const buttons = () => [...host.querySelectorAll<HTMLButtonElement>('li button')];
    expect(buttons()).toHaveLength(10);
    buttons()[4]!.click();
    expect(chosen).toEqual([4]);
    const more = [...host.querySelectorAll('button')].at(-1)!;
    expect(more.textContent).toContain('Show 3 more');
    more.click();
    await fixture.whenStable();
    expect(buttons()).toHaveLength(13);
  });
});
