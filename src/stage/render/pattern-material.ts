/**
 * Stipple (live) and hatch (failed) as a material: ink marks on a transparent ground, fixed to the object's centre on
 * the screen, so that the texture moves with the object and keeps its pitch. Both renderers draw the same marks.
 */
import { type Camera, Color, DoubleSide, type Object3D, ShaderMaterial, Vector2, Vector3 } from 'three';

export type PatternKind = 'stipple' | 'hatch';

/** Pitch of both patterns, CSS pixels; dot radius and line width as on the sheet's own patterns. */
export const PATTERN_PITCH = 6;
export const DOT_RADIUS = 0.95;
export const HATCH_WIDTH = 1.1;

const vertexShader = /* glsl */ `
  void main() {
    gl_Position = projectionMatrix * modelViewMatrix * vec4(position, 1.0);
  }
`;

const fragmentShader = /* glsl */ `
  uniform vec3 colour;
  uniform vec2 origin;   // pixels of the drawing buffer, from the lower left
  uniform float ratio;
  uniform vec2 turn;     // cosine and sine
  uniform float hatch;
  float dot2(vec2 p, vec2 at) {
    return clamp(${DOT_RADIUS.toFixed(3)} - distance(p, at) + 0.5, 0.0, 1.0);
  }
  void main() {
    vec2 d = (gl_FragCoord.xy - origin) / ratio;
    d.y = -d.y;
    vec2 p = vec2(d.x * turn.x + d.y * turn.y, d.y * turn.x - d.x * turn.y);
    float cover;
    if (hatch > 0.5) {
      float u = abs(mod((p.x + p.y) * 0.70710678, ${PATTERN_PITCH.toFixed(1)}) - ${(PATTERN_PITCH / 2).toFixed(1)});
      cover = clamp(${(HATCH_WIDTH / 2).toFixed(3)} - u + 0.5, 0.0, 1.0);
    } else {
      vec2 q = mod(p, ${PATTERN_PITCH.toFixed(1)});
      cover = max(dot2(q, vec2(1.5)), dot2(q, vec2(4.5)));
    }
    gl_FragColor = vec4(colour, cover);
  }
`;

export class PatternMaterial extends ShaderMaterial {
  readonly isPatternMaterial = true;
  readonly colour = new Color();
  /** Drawing-buffer pixels from the upper left. */
  readonly originPx = new Vector2();
  /** Turn of the pattern; rad, clockwise as seen. */
  angle = 0;

  constructor(readonly kind: PatternKind) {
    super({
      vertexShader,
      fragmentShader,
      uniforms: {
        colour: { value: new Color() },
        origin: { value: new Vector2() },
        ratio: { value: 1 },
        turn: { value: new Vector2(1, 0) },
        hatch: { value: kind === 'hatch' ? 1 : 0 },
      },
      transparent: true,
      depthWrite: false,
      side: DoubleSide,
      toneMapped: false,
    });
  }

  /** Finds the centre of `object` on a drawing buffer of this size and fills the shader's values. */
  prepare(object: Object3D, camera: Camera, width: number, height: number, ratio: number): void {
    centre.setFromMatrixPosition(object.matrixWorld).project(camera);
    this.originPx.set((0.5 + 0.5 * centre.x) * width, (0.5 - 0.5 * centre.y) * height);
    const uniforms = this.uniforms;
    (uniforms['colour'].value as Color).copy(this.colour); // a Color since the constructor
    (uniforms['origin'].value as Vector2).set(this.originPx.x, height - this.originPx.y); // a Vector2 since the constructor
    uniforms['ratio'].value = ratio;
    (uniforms['turn'].value as Vector2).set(Math.cos(this.angle), Math.sin(this.angle)); // as above
  }
}

const centre = new Vector3();

/** Samples per CSS pixel in a pattern tile. */
export const TILE_SAMPLES = 4;
/** Side of a tile in samples. */
export const TILE_SIDE = PATTERN_PITCH * TILE_SAMPLES;

/** Coverage 0 … 256 of one stipple cell, row by row; the CPU renderer's table. */
export function stippleTile(): Uint16Array {
  const tile = new Uint16Array(TILE_SIDE * TILE_SIDE);
  for (let j = 0; j < TILE_SIDE; j++) {
    for (let i = 0; i < TILE_SIDE; i++) {
      const x = (i + 0.5) / TILE_SAMPLES;
      const y = (j + 0.5) / TILE_SAMPLES;
      const near = Math.min(Math.hypot(x - 1.5, y - 1.5), Math.hypot(x - 4.5, y - 4.5));
      tile[j * TILE_SIDE + i] = Math.round(256 * Math.min(1, Math.max(0, DOT_RADIUS - near + 0.5)));
    }
  }
  return tile;
}

/** Coverage 0 … 256 across one hatch pitch; `TILE_SIDE` samples. */
export function hatchTile(): Uint16Array {
  const tile = new Uint16Array(TILE_SIDE);
  for (let i = 0; i < TILE_SIDE; i++) {
    const u = Math.abs((i + 0.5) / TILE_SAMPLES - PATTERN_PITCH / 2);
    tile[i] = Math.round(256 * Math.min(1, Math.max(0, HATCH_WIDTH / 2 - u + 0.5)));
  }
  return tile;
}
