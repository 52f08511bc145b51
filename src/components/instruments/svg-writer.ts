/** Writes to drawn elements only what changed: an identical write still costs a repaint. */
export interface SvgWriter {
  attr(element: Element | null | undefined, name: string, value: string): void;
  text(element: Element | null | undefined, value: string): void;
  show(element: Element | null | undefined, visible: boolean): void;
}

export function createSvgWriter(): SvgWriter {
  const written = new WeakMap<Element, Map<string, string>>();
  const changed = (element: Element, key: string, value: string): boolean => {
    let known = written.get(element);
    if (!known) written.set(element, (known = new Map()));
    if (known.get(key) === value) return false;
    known.set(key, value);
    return true;
  };
  return {
    attr(element, name, value) {
      if (element && changed(element, name, value)) element.setAttribute(name, value);
    },
    text(element, value) {
      if (element && changed(element, '#text', value)) element.textContent = value;
    },
    show(element, visible) {
      if (element && changed(element, 'visibility', visible ? 'visible' : 'hidden')) {
        element.setAttribute('visibility', visible ? 'visible' : 'hidden');
      }
    },
  };
}

/** One decimal place of a pixel is finer than any screen shows. */
export const px = (value: number): string => String(Math.round(value * 10) / 10);
