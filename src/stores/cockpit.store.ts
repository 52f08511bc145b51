import { defineStore } from 'pinia';
import { computed, ref, watch } from 'vue';
import { z } from 'zod';
import { DEFAULT_KEY_RATES, type KeyRates } from '../runner/input/keyboard-source.ts';
import { useSessionStore } from './session.store.ts';
import { readStored, writeStored } from './stored-json.ts';

export const CAMERAS = ['chase', 'nose', 'tower', 'top', 'side'] as const;
export type CameraChoice = (typeof CAMERAS)[number];

/** Limits of the adjustable rates; full deflections per second. */
export const KEY_RATE_LIMITS = { low: 0.3, high: 5 } as const;
const rate = (standard: number): z.ZodCatch<z.ZodNumber> =>
  z.number().min(KEY_RATE_LIMITS.low).max(KEY_RATE_LIMITS.high).catch(standard);

const cockpitSchema = z.object({
  stickPerS: rate(DEFAULT_KEY_RATES.stickPerS),
  pedalPerS: rate(DEFAULT_KEY_RATES.pedalPerS),
  leverPerS: rate(DEFAULT_KEY_RATES.leverPerS),
  returnPerS: rate(DEFAULT_KEY_RATES.returnPerS),
  pedalsSpring: z.boolean().catch(DEFAULT_KEY_RATES.pedalsSpring),
  camera: z.enum(CAMERAS).catch('chase'),
  ribbon: z.boolean().catch(true),
  ghost: z.boolean().catch(false),
  spoken: z.boolean().catch(false),
});
type Cockpit = z.infer<typeof cockpitSchema>;

const STANDARD: Cockpit = { ...DEFAULT_KEY_RATES, camera: 'chase', ribbon: true, ghost: false, spoken: false };
const keyFor = (personId: string): string => `sidewash.cockpit.${personId}`;

/** How this person likes the cockpit on this device: key rates, camera, ribbon, ghost. Kept in the browser. */
export const useCockpitStore = defineStore('cockpit', () => {
  const session = useSessionStore();
  const keeper = window.localStorage;
  const personId = computed(() => session.me?.person.id ?? null);
  const cockpit = ref<Cockpit>(STANDARD);

  watch(
    personId,
    (id) => {
      cockpit.value = (id === null ? undefined : readStored(keeper, keyFor(id), cockpitSchema)) ?? STANDARD;
    },
    { immediate: true },
  );

  function change(part: Partial<Cockpit>): void {
    cockpit.value = { ...cockpit.value, ...part };
    if (personId.value !== null) writeStored(keeper, keyFor(personId.value), cockpit.value);
  }

  const keyRates = computed<KeyRates>({
    get: () => {
      const { stickPerS, pedalPerS, leverPerS, returnPerS, pedalsSpring } = cockpit.value;
      return { stickPerS, pedalPerS, leverPerS, returnPerS, pedalsSpring };
    },
    set: (rates) => change(rates),
  });
  const camera = computed<CameraChoice>({
    get: () => cockpit.value.camera,
    set: (choice) => change({ camera: choice }),
  });
  const ribbon = computed<boolean>({ get: () => cockpit.value.ribbon, set: (on) => change({ ribbon: on }) });
  const ghost = computed<boolean>({ get: () => cockpit.value.ghost, set: (on) => change({ ghost: on }) });
  const spoken = computed<boolean>({ get: () => cockpit.value.spoken, set: (on) => change({ spoken: on }) });
  const standardRates = (): void => change(DEFAULT_KEY_RATES);

  return { keyRates, camera, ribbon, ghost, spoken, standardRates };
});
