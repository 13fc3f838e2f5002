import {
  type Camera,
  Color,
  Mesh,
  MeshBasicMaterial,
  OrthographicCamera,
  PlaneGeometry,
  Scene,
  ShaderMaterial,
  type Object3D,
  type Texture,
  Vector2,
  type WebGLRenderer,
  WebGLRenderTarget,
} from 'three';

const WIDTH_PX = 3;

const vertexShader = /* glsl */ `
  varying vec2 at;
  void main() {
    at = uv;
    gl_Position = vec4(position.xy, 0.0, 1.0);
  }
`;

/** A pixel outside the silhouette but near it belongs to the outline. */
const fragmentShader = /* glsl */ `
  uniform sampler2D silhouette;
  uniform vec2 pixel;
  uniform float widthPx;
  uniform vec3 colour;
  varying vec2 at;
  void main() {
    float inside = texture2D(silhouette, at).r;
    if (inside > 0.99) discard;
    float near = 0.0;
    for (int ring = 1; ring <= 2; ring++) {
      float reach = widthPx * float(ring) * 0.5;
      for (int step = 0; step < 12; step++) {
        float angle = float(step) * 0.5235988;
        vec2 offset = vec2(cos(angle), sin(angle)) * reach * pixel;
        near = max(near, texture2D(silhouette, at + offset).r);
      }
    }
    if (near < 0.01) discard;
    gl_FragColor = vec4(colour, near * (1.0 - inside));
    #include <colorspace_fragment>
  }
`;

/**
 * A line of even width round a piece's silhouette, seen through everything in front of it, so that a
 * selected piece is found by shape and not by colour alone.
 */
export class SelectionOutline {
  private readonly target: WebGLRenderTarget;
  private readonly flat = new MeshBasicMaterial({ color: '#ffffff' });
  private readonly uniforms = {
    silhouette: { value: null as Texture | null },
    pixel: { value: new Vector2(1, 1) },
    widthPx: { value: WIDTH_PX },
    colour: { value: new Color() },
  };
  private readonly sheet = new Mesh(
    new PlaneGeometry(2, 2),
    new ShaderMaterial({
      uniforms: this.uniforms,
      vertexShader,
      fragmentShader,
      transparent: true,
      depthTest: false,
      depthWrite: false,
    }),
  );
  private readonly sheetScene = new Scene().add(this.sheet);
  private readonly sheetCamera = new OrthographicCamera(-1, 1, 1, -1, 0, 1);
  private readonly ghost = new Mesh(undefined, this.flat);
  private readonly ghostScene = new Scene().add(this.ghost);
  private readonly previousClear = new Color();

  /** @param antialias whether the line's rims are smooth */
  constructor(antialias: boolean) {
    this.target = new WebGLRenderTarget(1, 1, { depthBuffer: false, samples: antialias ? 4 : 0 });
    this.uniforms.silhouette.value = this.target.texture;
    this.ghost.matrixAutoUpdate = false;
    this.sheet.frustumCulled = false;
  }

  setColour(colour: string): void {
    this.uniforms.colour.value.set(colour);
  }

  resize(widthPx: number, heightPx: number, pixelRatio: number): void {
    this.target.setSize(widthPx * pixelRatio, heightPx * pixelRatio);
    this.uniforms.pixel.value.set(1 / (widthPx * pixelRatio), 1 / (heightPx * pixelRatio));
    this.uniforms.widthPx.value = WIDTH_PX * pixelRatio;
  }

  /** Draws the outline over the picture that is already there. */
  draw(renderer: WebGLRenderer, camera: Camera, piece: Mesh): void {
    this.ghost.geometry = piece.geometry;
    this.ghost.matrix.copy((piece as Object3D).matrixWorld);
    this.ghost.matrixWorldNeedsUpdate = true;
    renderer.getClearColor(this.previousClear);
    const previousAlpha = renderer.getClearAlpha();
    renderer.setRenderTarget(this.target);
    renderer.setClearColor('#000000', 1);
    renderer.clear();
    renderer.render(this.ghostScene, camera);
    renderer.setRenderTarget(null);
    renderer.setClearColor(this.previousClear, previousAlpha);
    const autoClear = renderer.autoClear;
    renderer.autoClear = false;
    renderer.render(this.sheetScene, this.sheetCamera);
    renderer.autoClear = autoClear;
  }

  dispose(): void {
    this.target.dispose();
    this.flat.dispose();
    this.sheet.geometry.dispose();
    this.sheet.material.dispose();
  }
}
