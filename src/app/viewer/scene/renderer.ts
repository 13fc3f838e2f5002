import { WebGLRenderer } from 'three';

/** Thrown when the browser gives no WebGL2 context; the numbers of a page must serve without it. */
export class WebGlMissing extends Error {
  override readonly name = 'WebGlMissing';
  constructor() {
    super('This browser cannot draw the picture: WebGL 2 is missing or turned off.');
  }
}

/** A renderer on a canvas. Asks for the context itself, so that a refusal logs nothing. */
export function createRenderer(canvas: HTMLCanvasElement, antialias: boolean): WebGLRenderer {
  const context = canvas.getContext('webgl2', {
    alpha: true,
    antialias,
    depth: true,
    stencil: false,
    powerPreference: 'default',
  });
  if (!context) throw new WebGlMissing();
  const renderer = new WebGLRenderer({ canvas, context, antialias, alpha: true });
  renderer.localClippingEnabled = true;
  return renderer;
}
