import helmet from 'helmet';

/**
 * Nothing is loaded from elsewhere; WebAssembly may be compiled and workers made from blobs. No
 * HSTS and no upgrade of requests: the server speaks plain HTTP, a proxy in front adds them.
 */
export function createSecurityHeaders() {
  return helmet({
    hsts: false,
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        'default-src': ["'self'"],
        'script-src': ["'self'", "'wasm-unsafe-eval'"],
        'script-src-attr': ["'none'"],
        'style-src': ["'self'", "'unsafe-inline'"],
        'font-src': ["'self'"],
        'img-src': ["'self'", 'data:', 'blob:'],
        'connect-src': ["'self'", 'blob:'],
        'worker-src': ["'self'", 'blob:'],
        'object-src': ["'none'"],
        'base-uri': ["'self'"],
        'form-action': ["'self'"],
        'frame-ancestors': ["'none'"],
      },
    },
  });
}
