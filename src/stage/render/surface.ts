/** Pixels of the CPU renderer: colour as packed ABGR words, depth as 1/w (larger is nearer, 0 is empty). */

export class Surface {
  width = 0;
  height = 0;
  colour = new Uint32Array(0);
  depth = new Float32Array(0);
  /** Rows that hold depths, first and one past the last; only they are wiped. */
  depthFrom = 0;
  depthTo = 0;
  image: ImageData | null = null;

  /** Allocates for a size in device pixels. */
  resize(width: number, height: number): void {
    if (width === this.width && height === this.height) return;
    this.width = width;
    this.height = height;
    this.image = width > 0 && height > 0 ? new ImageData(width, height) : null;
    this.colour = this.image === null ? new Uint32Array(0) : new Uint32Array(this.image.data.buffer);
    this.depth = new Float32Array(width * height);
    this.depthFrom = height;
    this.depthTo = 0;
  }

  clear(colour: number): void {
    this.colour.fill(colour);
    if (this.depthTo > this.depthFrom) this.depth.fill(0, this.depthFrom * this.width, this.depthTo * this.width);
    this.depthFrom = this.height;
    this.depthTo = 0;
  }

  /** Notes that rows from … to (exclusive) take depths. */
  touch(from: number, to: number): void {
    if (from < this.depthFrom) this.depthFrom = from;
    if (to > this.depthTo) this.depthTo = to;
  }
}

/** Opaque ABGR word of a screen colour with parts 0 … 1. */
export function packColour(r: number, g: number, b: number): number {
  return (0xff000000 | (byte(b) << 16) | (byte(g) << 8) | byte(r)) >>> 0;
}

function byte(value: number): number {
  const scaled = (value * 255 + 0.5) | 0;
  return scaled < 0 ? 0 : scaled > 255 ? 255 : scaled;
}

/** `over` laid on `under` with a share of 0 … 256. */
export function blend(under: number, over: number, share: number): number {
  const keep = 256 - share;
  const rb = ((Math.imul(over & 0xff00ff, share) >>> 0) + (Math.imul(under & 0xff00ff, keep) >>> 0)) >>> 8;
  const g = (Math.imul((over >>> 8) & 0xff, share) + Math.imul((under >>> 8) & 0xff, keep)) & 0xff00;
  return ((rb & 0xff00ff) | g | 0xff000000) >>> 0;
}
