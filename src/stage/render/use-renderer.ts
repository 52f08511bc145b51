/** The stage's renderer inside TresJS: chosen once, made on the canvas TresJS owns, replaced by the CPU renderer when WebGL fails or its context is lost. */
import type { TresContext, TresRenderer, TresRendererSetupContext } from '@tresjs/core';
import { LinearSRGBColorSpace, NoToneMapping, WebGLRenderer } from 'three';
import { computed, onBeforeUnmount, type ShallowRef, shallowRef, toValue, watch } from 'vue';
import type { RendererChange, RendererChoice } from '../stage-types.ts';
import { chooseRenderer, probeWebGl } from './renderer-choice.ts';
import { SoftRenderer } from './soft-renderer.ts';

/** What the stage asks of either renderer. */
export type StageRenderer = WebGLRenderer | SoftRenderer;

export interface RendererSlot {
  /** What draws, and why. */
  change: ShallowRef<RendererChange>;
  /** Changes when the canvas must be mounted anew. */
  canvasKey: { readonly value: string };
  /** Given once TresJS has a canvas with an area; null until then. */
  context: ShallowRef<TresContext | null>;
  renderer: ShallowRef<StageRenderer | null>;
  /** For TresCanvas' `renderer`. */
  create: (setup: TresRendererSetupContext) => TresRenderer;
}

export function useRenderer(choice: () => RendererChoice): RendererSlot {
  const change = shallowRef<RendererChange>(chooseRenderer(choice(), probeWebGl()));
  const generation = shallowRef(0);
  const context = shallowRef<TresContext | null>(null);
  const renderer = shallowRef<StageRenderer | null>(null);
  let watched: HTMLCanvasElement | null = null;

  function switchTo(next: RendererChange): void {
    unwatch();
    context.value = null;
    renderer.value = null;
    change.value = next;
    generation.value += 1;
  }
  function lost(event: Event): void {
    event.preventDefault();
    switchTo({ renderer: 'cpu', reason: 'context-lost' });
  }
  function unwatch(): void {
    watched?.removeEventListener('webglcontextlost', lost);
    watched = null;
  }
  watch(choice, (next) => {
    const chosen = chooseRenderer(next, probeWebGl());
    if (chosen.renderer !== change.value.renderer) switchTo(chosen);
    else change.value = chosen;
  });
  onBeforeUnmount(unwatch);

  function create(setup: TresRendererSetupContext): TresRenderer {
    const canvas = toValue(setup.canvas);
    const made = change.value.renderer === 'webgl' ? webGlOn(canvas) : null;
    if (made === null && change.value.renderer === 'webgl') change.value = { renderer: 'cpu', reason: 'no-webgl' };
    if (made !== null) {
      watched = canvas;
      canvas.addEventListener('webglcontextlost', lost);
    }
    renderer.value = made ?? new SoftRenderer(canvas);
    // SoftRenderer answers every call that TresJS makes of a renderer; the type names three's own classes only
    return renderer.value as unknown as TresRenderer;
  }
  const canvasKey = computed(() => `canvas ${generation.value}`);
  return { change, canvasKey, context, renderer, create };
}

/** A WebGL renderer that shows screen colours as they are; null when the canvas gives no context. */
function webGlOn(canvas: HTMLCanvasElement): WebGLRenderer | null {
  // asked first, because three.js throws and logs when there is none
  const gl = canvas.getContext('webgl2', { antialias: true, alpha: false, powerPreference: 'high-performance' });
  if (gl === null) return null;
  const renderer = new WebGLRenderer({ canvas, context: gl, antialias: true, alpha: false });
  renderer.outputColorSpace = LinearSRGBColorSpace;
  renderer.toneMapping = NoToneMapping;
  return renderer;
}
