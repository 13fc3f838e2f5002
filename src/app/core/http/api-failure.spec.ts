import { HttpErrorResponse } from '@angular/common/http';
import { ApiFailure, sentenceFor, toApiFailure } from './api-failure';

describe('toApiFailure', () => {
  it("keeps the server's code, sentence and field remarks", () => {
    const error = {
      code: 'request.invalid',
      message: 'Some fields are wrong.',
      details: [{ path: 'heightMm', message: 'Height must be more than 0 mm' }],
    };
    const failure = toApiFailure(new HttpErrorResponse({ status: 400, error: { error } }));
    expect(failure.code).toBe('request.invalid');
    expect(failure.message).toBe('Some fields are wrong.');
    expect(failure.status).toBe(400);
    expect(failure.details).toEqual(error.details);
  });

  it('reads a refusal that arrives as text, as failed downloads do', () => {
    const body = JSON.stringify({ error: { code: 'plan.notFound', message: 'No such plan.' } });
    const failure = toApiFailure(new HttpErrorResponse({ status: 404, error: body }));
    expect(failure.code).toBe('plan.notFound');
  });

  it('reads a refusal that came as bytes, so that a picture too can ask for a new session', () => {
    const body = JSON.stringify({ error: { code: 'session.required', message: 'Sign in.' } });
    const error = Uint8Array.from(body, (letter) => letter.charCodeAt(0)).buffer;
    const failure = toApiFailure(new HttpErrorResponse({ status: 401, error }));
    expect(failure.code).toBe('session.required');
  });

  it('names the network when no answer came', () => {
    const failure = toApiFailure(new HttpErrorResponse({ status: 0 }));
    expect(failure.code).toBe('network.unreachable');
  });

  it.each(['<html>Bad gateway</html>', null, { error: { code: 'made.up', message: 'x' } }])(
    'says that it cannot read %j, without showing it',
    (error) => {
      const failure = toApiFailure(new HttpErrorResponse({ status: 502, error }));
      expect(failure.code).toBe('answer.unexpected');
      expect(failure.message).not.toContain('html');
    },
  );

  it('leaves a failure as it is', () => {
    const failure = new ApiFailure('model.inUse', 'In use.', 409);
    expect(toApiFailure(failure)).toBe(failure);
  });
});

describe('sentenceFor', () => {
  it('never shows the words of an unexpected error', () => {
    expect(sentenceFor(new TypeError('x is undefined'))).not.toContain('undefined');
  });
});
