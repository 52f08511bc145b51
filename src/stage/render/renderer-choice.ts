/** Which renderer this machine should use. WebGL on a graphics card; the CPU renderer where WebGL is missing or itself runs on the CPU, which is slower. */
import type { ActiveRenderer, RendererChange, RendererChoice } from '../stage-types.ts';

export type WebGlKind = 'hardware' | 'software' | 'none';

/** Words in the unmasked renderer string that tell a software implementation. */
const SOFTWARE = /swiftshader|llvmpipe|softpipe|software|basic render|\bswr\b|virgl/i;

export const isSoftwareName = (name: string): boolean => SOFTWARE.test(name);

let known: WebGlKind | null = null;

/** What WebGL is here; asked once a page. */
export function probeWebGl(): WebGlKind {
  known ??= ask();
  return known;
}

function ask(): WebGlKind {
  const canvas = document.createElement('canvas');
  const gl = canvas.getContext('webgl2');
  if (gl === null) return 'none';
  const info = gl.getExtension('WEBGL_debug_renderer_info');
  const name: unknown = gl.getParameter(info === null ? gl.RENDERER : info.UNMASKED_RENDERER_WEBGL);
  gl.getExtension('WEBGL_lose_context')?.loseContext();
  return typeof name === 'string' && isSoftwareName(name) ? 'software' : 'hardware';
}

/** Renderer for the user's choice on such a machine, with the reason. */
export function chooseRenderer(choice: RendererChoice, webGl: WebGlKind): RendererChange {
  const has = webGl !== 'none';
  if (choice === 'cpu') return { renderer: 'cpu', reason: 'chosen' };
  if (!has) return { renderer: 'cpu', reason: 'no-webgl' };
  if (choice === 'webgl') return { renderer: 'webgl', reason: 'chosen' };
  return webGl === 'software'
    ? { renderer: 'cpu', reason: 'software-webgl' }
    : { renderer: 'webgl', reason: 'hardware' };
}

/** Pixels the CPU renderer fills in a frame at most, before it draws coarser than the screen: about 1920 × 1080. */
const CPU_PIXELS = 2.1e6;

/** Device pixels a CSS pixel for a picture of this size. */
export function pixelRatioFor(
  renderer: ActiveRenderer,
  width: number,
  height: number,
  devicePixelRatio: number,
): number {
  if (renderer === 'webgl') return Math.min(2, devicePixelRatio);
  const affordable = Math.sqrt(CPU_PIXELS / Math.max(1, width * height));
  return Math.min(devicePixelRatio, Math.max(0.5, affordable));
}
