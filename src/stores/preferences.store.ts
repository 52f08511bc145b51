import { useMediaQuery } from '@vueuse/core';
import { defineStore } from 'pinia';
import { computed, ref, watch } from 'vue';
import { z } from 'zod';
import type { UnitPreference } from '#shared/units/quantity.ts';
import { causeOf } from '../services/api-error.ts';
import { useNoticesStore } from './notices.store.ts';
import { useSessionStore } from './session.store.ts';
import { readStored, writeStored } from './stored-json.ts';

/** Arrows of the stage by the letter on their tag. */
export const ARROW_IDS = ['R', 'F', 'Y', 'LL', 'LR', 'T', 'D', 'W', 'N', 'L'] as const;
export type ArrowId = (typeof ARROW_IDS)[number];
export type ThemeChoice = 'system' | 'light' | 'dark';
export type RendererChoice = 'auto' | 'webgl' | 'cpu';

const deviceSchema = z.object({
  theme: z.enum(['system', 'light', 'dark']).catch('system'),
  renderer: z.enum(['auto', 'webgl', 'cpu']).catch('auto'),
  /** Name of the organisation last signed in here; shown on the sign-in page. */
  organisation: z.string().max(200).nullable().catch(null),
});
const personSchema = z.object({
  arrows: z.array(z.enum(ARROW_IDS)).nullable().catch(null),
});
type Device = z.infer<typeof deviceSchema>;
type Person = z.infer<typeof personSchema>;

/** `public/first-paint.js` reads the same key before anything is drawn. */
const DEVICE_KEY = 'sidewash.device';
const personKey = (id: string): string => `sidewash.person.${id}`;
const DEVICE_DEFAULTS: Device = { theme: 'system', renderer: 'auto', organisation: null };
const PERSON_DEFAULTS: Person = { arrows: null };

/** What is preferred on this device, and what this person prefers on it. Kept in the browser, but for the units. */
export const usePreferencesStore = defineStore('preferences', () => {
  const session = useSessionStore();
  const notices = useNoticesStore();
  const keeper = window.localStorage;
  const device = ref<Device>(readStored(keeper, DEVICE_KEY, deviceSchema) ?? DEVICE_DEFAULTS);
  const person = ref<Person>(PERSON_DEFAULTS);
  const personId = computed(() => session.me?.person.id ?? null);

  watch(
    personId,
    (id) => {
      person.value = (id === null ? undefined : readStored(keeper, personKey(id), personSchema)) ?? PERSON_DEFAULTS;
      if (session.me) device.value = { ...device.value, organisation: session.me.organisation.name };
    },
    { immediate: true },
  );
  watch(device, (value) => writeStored(keeper, DEVICE_KEY, value));

  function setPerson(change: Partial<Person>): void {
    person.value = { ...person.value, ...change };
    if (personId.value !== null) writeStored(keeper, personKey(personId.value), person.value);
  }

  const theme = computed<ThemeChoice>({
    get: () => device.value.theme,
    set: (choice) => (device.value = { ...device.value, theme: choice }),
  });
  const systemIsDark = useMediaQuery('(prefers-color-scheme: dark)');
  const shownTheme = computed<'light' | 'dark'>(() =>
    theme.value === 'system' ? (systemIsDark.value ? 'dark' : 'light') : theme.value,
  );
  watch(shownTheme, (name) => (document.documentElement.dataset['theme'] = name), { immediate: true });

  const renderer = computed<RendererChoice>({
    get: () => device.value.renderer,
    set: (choice) => (device.value = { ...device.value, renderer: choice }),
  });
  /** Chosen just now and on its way to the server. */
  const unitsOnTheWay = ref<UnitPreference | null>(null);
  /** The person's own choice, kept by the server so that it goes along to every device; else the organisation's. */
  const units = computed<UnitPreference>({
    get: () => unitsOnTheWay.value ?? session.me?.person.units ?? session.me?.organisation.settings.units ?? 'aviation',
    set: (choice) => void chooseUnits(choice),
  });
  async function chooseUnits(choice: UnitPreference): Promise<void> {
    unitsOnTheWay.value = choice;
    try {
      await session.saveProfile({ units: choice });
    } catch (error) {
      notices.say(`Units not kept. ${causeOf(error)}`);
    } finally {
      unitsOnTheWay.value = null;
    }
  }
  const arrows = computed<ReadonlySet<ArrowId>>({
    get: () => new Set(person.value.arrows ?? ARROW_IDS),
    set: (shown) => setPerson({ arrows: ARROW_IDS.filter((id) => shown.has(id)) }),
  });
  const lastOrganisation = computed(() => device.value.organisation);

  return { theme, shownTheme, renderer, units, arrows, lastOrganisation };
});
