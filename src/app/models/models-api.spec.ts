import { HttpEventType, provideHttpClient } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { ModelsApi, type UploadStep } from './models-api';
import { makeModel } from './testing/model-fixtures';

function setUp() {
  TestBed.configureTestingModule({
    providers: [provideHttpClient(), provideHttpClientTesting()],
  });
  return { api: TestBed.inject(ModelsApi), server: TestBed.inject(HttpTestingController) };
}

describe('ModelsApi', () => {
  it('uploads a file as a form, reports how much is sent, and ends with the model', () => {
    const { api, server } = setUp();
    const steps: UploadStep[] = [];
    api.upload(new File(['solid'], 'heron é.stl')).subscribe((step) => steps.push(step));
    const request = server.expectOne('/api/models');
    const sent = (request.request.body as FormData).get('file') as File;
    expect(sent.name).toBe('heron é.stl');
    request.event({ type: HttpEventType.UploadProgress, loaded: 1, total: 4 });
    request.flush(makeModel());
    expect(steps).toEqual([
      { kind: 'sent', fraction: 0.25 },
      { kind: 'stored', model: makeModel() },
    ]);
  });

  it('aborts the request when nobody waits for it any more', () => {
    const { api, server } = setUp();
    const sending = api.upload(new File(['solid'], 'a.stl')).subscribe();
    const request = server.expectOne('/api/models');
    sending.unsubscribe();
    expect(request.cancelled).toBe(true);
  });

  it('does not take an answer that breaks the contract', async () => {
    const { api, server } = setUp();
    const answer = api.get('x');
    server.expectOne('/api/models/x').flush({ id: 7 });
    await expect(answer).rejects.toMatchObject({ code: 'answer.unexpected' });
  });
});
