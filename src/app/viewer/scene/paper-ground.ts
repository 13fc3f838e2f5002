import { Color, DoubleSide, Mesh, PlaneGeometry, ShaderMaterial, Vector2 } from 'three';
import { disposeTree } from './disposal';

/** Where the sheet lies, mm. Lines are counted from `origin`; it fades out at `radiusMm`. */
export interface GroundPlace {
  readonly centre: readonly [number, number];
  readonly origin: readonly [number, number];
  readonly heightMm: number;
  readonly radiusMm: number;
  readonly stepMm: number;
}

const vertexShader = /* glsl */ `
  varying vec2 atMm;
  void main() {
    vec4 world = modelMatrix * vec4(position, 1.0);
    atMm = world.xy;
    gl_Position = projectionMatrix * viewMatrix * world;
  }
`;

/** Lines one pixel wide at every zoom, fading towards the rim and where they would run together. */
const fragmentShader = /* glsl */ `
  uniform vec3 lineColour;
  uniform float stepMm;
  uniform vec2 centreMm;
  uniform vec2 originMm;
  uniform float radiusMm;
  varying vec2 atMm;

  float lines(float spacing) {
    vec2 at = (atMm - originMm) / spacing;
    vec2 width = max(fwidth(at), vec2(1e-6));
    vec2 far = abs(fract(at - 0.5) - 0.5) / width;
    float crowded = smoothstep(0.25, 0.5, max(width.x, width.y));
    return (1.0 - min(min(far.x, far.y), 1.0)) * (1.0 - crowded);
  }

  void main() {
    float fade = 1.0 - smoothstep(0.55, 1.0, distance(atMm, centreMm) / radiusMm);
    float strength = max(lines(stepMm) * 0.3, lines(stepMm * 10.0) * 0.5);
    gl_FragColor = vec4(lineColour, strength * fade);
    if (gl_FragColor.a < 0.01) discard;
    #include <colorspace_fragment>
  }
`;

/** The sheet under the object: a faint square grid that ends softly. */
export class PaperGround {
  private readonly uniforms = {
    lineColour: { value: new Color() },
    stepMm: { value: 10 },
    centreMm: { value: new Vector2() },
    originMm: { value: new Vector2() },
    radiusMm: { value: 1 },
  };
  readonly mesh = new Mesh(
    new PlaneGeometry(2, 2),
    new ShaderMaterial({
      uniforms: this.uniforms,
      vertexShader,
      fragmentShader,
      transparent: true,
      depthWrite: false,
      side: DoubleSide,
    }),
  );

  setColour(colour: string): void {
    this.uniforms.lineColour.value.set(colour);
  }

  /** Lays the grid under an object. */
  place(sheet: GroundPlace): void {
    this.uniforms.centreMm.value.set(...sheet.centre);
    this.uniforms.originMm.value.set(...sheet.origin);
    this.uniforms.radiusMm.value = sheet.radiusMm;
    this.uniforms.stepMm.value = sheet.stepMm;
    this.mesh.position.set(sheet.centre[0], sheet.centre[1], sheet.heightMm);
    this.mesh.scale.set(sheet.radiusMm, sheet.radiusMm, 1);
  }

  dispose(): void {
    disposeTree(this.mesh);
  }
}
