import { TestBed } from '@angular/core/testing';
import { FileDrop } from './file-drop';

async function setUp() {
  const fixture = TestBed.createComponent(FileDrop);
  fixture.componentRef.setInput('action', 'Upload models');
  fixture.componentRef.setInput('accept', '.stl');
  const chosen: string[][] = [];
  fixture.componentInstance.filesChosen.subscribe((files) => chosen.push(files.map((f) => f.name)));
  await fixture.whenStable();
  const host = fixture.nativeElement as HTMLElement;
  const picker = host.querySelector('input') as HTMLInputElement;
  const button = host.querySelector('button') as HTMLButtonElement;
  return { fixture, host, picker, button, chosen };
}

function drag(type: string, names: readonly string[] = []): Event {
  const event = new Event(type, { bubbles: true, cancelable: true });
  const files = names.map((name) => new File(['x'], name));
  return Object.assign(event, { dataTransfer: { files } });
}

describe('FileDrop', () => {
  it("opens the system's picker from a button, which every keyboard reaches", async () => {
    const { picker, button } = await setUp();
    const opened = vi.spyOn(picker, 'click').mockImplementation(() => undefined);
    button.click();
    expect(button.textContent).toContain('Upload models');
    expect(opened).toHaveBeenCalledTimes(1);
    expect(picker.accept).toBe('.stl');
  });

  it('passes picked files on and can pick the same ones again', async () => {
    const { picker, chosen } = await setUp();
    Object.defineProperty(picker, 'files', { value: [new File(['x'], 'bell.stl')] });
    picker.dispatchEvent(new Event('change'));
    picker.dispatchEvent(new Event('change'));
    expect(chosen).toEqual([['bell.stl'], ['bell.stl']]);
  });

  it('passes dropped files on and shows where they would fall', async () => {
    const { fixture, host, chosen } = await setUp();
    host.dispatchEvent(drag('dragover'));
    await fixture.whenStable();
    expect(host.classList).toContain('over');
    host.dispatchEvent(drag('drop', ['a.stl', 'b.stl']));
    await fixture.whenStable();
    expect(host.classList).not.toContain('over');
    expect(chosen).toEqual([['a.stl', 'b.stl']]);
  });

  it('keeps the page when a file is dropped beside it, and ignores a drop without files', async () => {
    const { host, chosen } = await setUp();
    const beside = drag('drop', ['a.stl']);
    document.dispatchEvent(beside);
    expect(beside.defaultPrevented).toBe(true);
    host.dispatchEvent(drag('drop'));
    expect(chosen).toEqual([]);
  });
});
