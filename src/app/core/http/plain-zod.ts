import * as z from 'zod';

// Our content security policy forbids code made from strings; without this zod tries it once and
// the browser reports a violation. Must run before any schema is made, so main.ts imports it first.
z.config({ jitless: true });
