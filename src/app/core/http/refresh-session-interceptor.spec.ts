import {
  HttpClient,
  provideHttpClient,
  withInterceptors,
  withXsrfConfiguration,
} from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { firstValueFrom } from 'rxjs';
import { SessionRefresher } from '../auth/session-refresher';
import { mapFailures } from './map-failures-interceptor';
import { refreshSession } from './refresh-session-interceptor';

const signedOut = { error: { code: 'session.required', message: 'Please sign in.' } };
const unauthorised = { status: 401, statusText: 'Unauthorized' };

function setUp() {
  document.cookie = 'XSRF-TOKEN=first; path=/';
  TestBed.configureTestingModule({
    providers: [
      provideHttpClient(
        withXsrfConfiguration({ cookieName: 'XSRF-TOKEN', headerName: 'X-XSRF-TOKEN' }),
        withInterceptors([refreshSession, mapFailures]),
      ),
      provideHttpClientTesting(),
    ],
  });
  return { http: TestBed.inject(HttpClient), server: TestBed.inject(HttpTestingController) };
}

/** The renewal starts behind a lock, so its request comes a few turns later. */
async function expectRenewal(server: HttpTestingController) {
  return vi.waitFor(() => server.expectOne('/api/session/refresh'));
}

describe('refreshSession', () => {
  it('renews the session once and repeats the request with the new forgery token', async () => {
    const { http, server } = setUp();
    const answer = firstValueFrom(http.post('/api/plans', { seed: 1 }));
    server.expectOne('/api/plans').flush(signedOut, unauthorised);
    const renewal = await expectRenewal(server);
    document.cookie = 'XSRF-TOKEN=second; path=/';
    renewal.flush({});
    const again = await vi.waitFor(() => server.expectOne('/api/plans'));
    expect(again.request.headers.get('X-XSRF-TOKEN')).toBe('second');
    expect(again.request.body).toEqual({ seed: 1 });
    again.flush({ made: true });
    expect(await answer).toEqual({ made: true });
    server.verify();
  });

  it('lets requests that fail together share one renewal', async () => {
    const { http, server } = setUp();
    const answers = Promise.all([
      firstValueFrom(http.get('/api/models')),
      firstValueFrom(http.get('/api/envelopes')),
    ]);
    server.expectOne('/api/models').flush(signedOut, unauthorised);
    server.expectOne('/api/envelopes').flush(signedOut, unauthorised);
    (await expectRenewal(server)).flush({});
    (await vi.waitFor(() => server.expectOne('/api/models'))).flush('models');
    (await vi.waitFor(() => server.expectOne('/api/envelopes'))).flush('envelopes');
    expect(await answers).toEqual(['models', 'envelopes']);
    server.verify();
  });

  it('fails with the first refusal and ends the session when it cannot be renewed', async () => {
    const { http, server } = setUp();
    let ends = 0;
    TestBed.inject(SessionRefresher).ended$.subscribe(() => ends++);
    const answer = firstValueFrom(http.get('/api/models'));
    server.expectOne('/api/models').flush(signedOut, unauthorised);
    (await expectRenewal(server)).flush(signedOut, unauthorised);
    await expect(answer).rejects.toMatchObject({ code: 'session.required' });
    expect(ends).toBe(1);
    server.verify();
  });

  it('does not end the session when only the network fails', async () => {
    const { http, server } = setUp();
    let ends = 0;
    TestBed.inject(SessionRefresher).ended$.subscribe(() => ends++);
    const answer = firstValueFrom(http.get('/api/models'));
    server.expectOne('/api/models').flush(signedOut, unauthorised);
    (await expectRenewal(server)).error(new ProgressEvent('error'));
    await expect(answer).rejects.toMatchObject({ code: 'network.unreachable' });
    expect(ends).toBe(0);
  });

  it('does not repeat a request a second time', async () => {
    const { http, server } = setUp();
    const answer = firstValueFrom(http.get('/api/models'));
    server.expectOne('/api/models').flush(signedOut, unauthorised);
    (await expectRenewal(server)).flush({});
    (await vi.waitFor(() => server.expectOne('/api/models'))).flush(signedOut, unauthorised);
    await expect(answer).rejects.toMatchObject({ code: 'session.required' });
    server.verify();
  });

  it('does not renew for wrong words at the door or for other refusals', async () => {
    const { http, server } = setUp();
    const signIn = firstValueFrom(http.post('/api/session', {}));
    server.expectOne('/api/session').flush(signedOut, unauthorised);
    await expect(signIn).rejects.toMatchObject({ status: 401 });
    const forbidden = firstValueFrom(http.get('/api/models'));
    const error = { code: 'session.forbidden', message: 'Not for your role.' };
    server.expectOne('/api/models').flush({ error }, { status: 403, statusText: 'Forbidden' });
    await expect(forbidden).rejects.toMatchObject({ code: 'session.forbidden' });
    server.verify();
  });
});
