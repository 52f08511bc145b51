import { defineStore } from 'pinia';
import { computed, ref, watch } from 'vue';
import { type ControlsProfile, STANDARD_PROFILE, controlsProfileSchema } from '../runner/input/device-profile.ts';
import { useSessionStore } from './session.store.ts';
import { readStored, writeStored } from './stored-json.ts';

const keyFor = (personId: string): string => `sidewash.controls.${personId}`;

/** Sticks, pedals and levers as this person has set them up in this browser. */
export const useControlsStore = defineStore('controls', () => {
  const session = useSessionStore();
  const keeper = window.localStorage;
  const personId = computed(() => session.me?.person.id ?? null);
  const profile = ref<ControlsProfile>(STANDARD_PROFILE);

  watch(
    personId,
    (id) => {
      profile.value =
        (id === null ? undefined : readStored(keeper, keyFor(id), controlsProfileSchema)) ?? STANDARD_PROFILE;
    },
    { immediate: true },
  );

  /** Returns false where the browser refuses to keep it: it then holds until the page is left. */
  function keep(next: ControlsProfile): boolean {
    profile.value = next;
    return personId.value !== null && writeStored(keeper, keyFor(personId.value), next);
  }

  return { profile, keep };
});
