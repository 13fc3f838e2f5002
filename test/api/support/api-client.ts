import type { Express } from 'express';
import request, { type Response, type Test } from 'supertest';

/** A browser as far as the API is concerned: keeps cookies and copies the forgery token. */
export class ApiClient {
  readonly cookies = new Map<string, string>();

  constructor(private readonly app: Express) {}

  async signIn(email: string, password: string): Promise<Response> {
    return this.send('post', '/api/session', { email, password });
  }

  get(path: string): Promise<Response> {
    return this.send('get', path);
  }

  /** Sends JSON and keeps the cookies that come back. */
  async send(method: Method, path: string, body?: object): Promise<Response> {
    const test = this.request(method, path);
    const response = await (body ? test.send(body) : test);
    this.keepCookies(response);
    return response;
  }

  /** A request to build on, with cookies and token. */
  request(method: Method, path: string): Test {
    const test = request(this.app)[method](path).set('Cookie', this.cookieHeader());
    const token = this.cookies.get('XSRF-TOKEN');
    return token ? test.set('X-XSRF-TOKEN', token) : test;
  }

  cookieHeader(): string {
    return [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
  }

  keepCookies(response: Response): void {
    const headers = (response.headers['set-cookie'] ?? []) as unknown as string[];
    for (const header of headers) {
      const [, name = '', value = ''] = /^([^=]+)=([^;]*)/.exec(header) ?? [];
      if (value === '') this.cookies.delete(name);
      else this.cookies.set(name, value);
    }
  }

  /** The same person in another tab that has not seen later cookies. */
  clone(): ApiClient {
    const copy = new ApiClient(this.app);
    for (const [name, value] of this.cookies) copy.cookies.set(name, value);
    return copy;
  }
}

export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete';
