import { signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { Subject } from 'rxjs';
import { SessionStore } from '../core/auth/session-store';
import { ApiFailure } from '../core/http/api-failure';
import { ModelsApi, type UploadStep } from './models-api';
import { makeModel } from './testing/model-fixtures';
import { UploadQueue } from './upload-queue';

const file = (name: string, bytes = 10) => new File([new Uint8Array(bytes)], name);

function setUp() {
  const wires: { name: string; steps: Subject<UploadStep> }[] = [];
  const isSignedIn = signal(true);
  const upload = (sent: File) => {
    const steps = new Subject<UploadStep>();
    wires.push({ name: sent.name, steps });
    return steps;
  };
  TestBed.configureTestingModule({
    providers: [
      { provide: ModelsApi, useValue: { upload } },
      { provide: SessionStore, useValue: { isSignedIn } },
    ],
  });
  const queue = TestBed.inject(UploadQueue);
  const states = () => queue.uploads().map((one) => one.state);
  return { queue, wires, states, isSignedIn };
}

describe('UploadQueue', () => {
  it('sends files one after another, with real progress', () => {
    const { queue, wires, states } = setUp();
    queue.add([file('a.stl'), file('b.stl')]);
    expect(states()).toEqual(['sending', 'waiting']);
    wires[0]?.steps.next({ kind: 'sent', fraction: 0.4 });
    expect(queue.uploads()[0]?.fraction).toBe(0.4);
    wires[0]?.steps.next({ kind: 'sent', fraction: 1 });
    expect(states()).toEqual(['storing', 'waiting']);
    expect(wires).toHaveLength(1);
    wires[0]?.steps.next({ kind: 'stored', model: makeModel() });
    wires[0]?.steps.complete();
    expect(states()).toEqual(['done', 'sending']);
    expect(wires.map((wire) => wire.name)).toEqual(['a.stl', 'b.stl']);
  });

  it('tells who wants to know about every stored model', () => {
    const { queue, wires } = setUp();
    const stored: string[] = [];
    queue.stored$.subscribe((model) => stored.push(model.name));
    queue.add([file('a.stl')]);
    wires[0]?.steps.next({ kind: 'stored', model: makeModel({ name: 'A' }) });
    expect(stored).toEqual(['A']);
  });

  it('takes a file off the wire when it is cancelled, and sends the next', () => {
    const { queue, wires, states } = setUp();
    queue.add([file('a.stl'), file('b.stl'), file('c.stl')]);
    queue.cancel(2);
    queue.cancel(1);
    expect(wires[0]?.steps.observed).toBe(false);
    expect(states()).toEqual(['cancelled', 'cancelled', 'sending']);
    expect(wires.map((wire) => wire.name)).toEqual(['a.stl', 'c.stl']);
  });

  it('does not send what cannot be a model', () => {
    const { queue, wires, states } = setUp();
    queue.add([file('notes.txt'), file('empty.stl', 0)]);
    expect(states()).toEqual(['refused', 'refused']);
    expect(wires).toHaveLength(0);
    expect(queue.isBusy()).toBe(false);
  });

  it("shows the server's refusal, goes on, and can try the file again", () => {
    const { queue, wires, states } = setUp();
    queue.add([file('a.stl'), file('b.stl')]);
    const sentence = 'This is a PNG picture, not an STL file.';
    wires[0]?.steps.error(new ApiFailure('request.invalid', sentence, 415));
    expect(queue.uploads()[0]?.problem).toBe(sentence);
    expect(states()).toEqual(['refused', 'sending']);
    queue.tryAgain(1);
    expect(queue.uploads().map((one) => one.file.name)).toEqual(['b.stl', 'a.stl']);
    expect(states()).toEqual(['sending', 'waiting']);
  });

  it('takes finished lines off the list, never one that is on its way', () => {
    const { queue, states } = setUp();
    queue.add([file('notes.txt'), file('a.stl')]);
    queue.dismiss(1);
    queue.dismiss(2);
    expect(states()).toEqual(['sending']);
    queue.add([file('notes.txt'), file('more.txt'), file('b.stl')]);
    queue.dismissFinished();
    expect(states()).toEqual(['sending', 'waiting']);
  });

  it('asks before the page is left while something is on its way', () => {
    const { queue } = setUp();
    const leave = () => {
      const event = new Event('beforeunload', { cancelable: true });
      window.dispatchEvent(event);
      return event.defaultPrevented;
    };
    expect(leave()).toBe(false);
    queue.add([file('a.stl')]);
    expect(leave()).toBe(true);
  });

  it('stops and forgets everything when the person signs out', () => {
    const { queue, wires, isSignedIn } = setUp();
    queue.add([file('a.stl')]);
    isSignedIn.set(false);
    TestBed.tick();
    expect(wires[0]?.steps.observed).toBe(false);
    expect(queue.uploads()).toEqual([]);
  });
});
