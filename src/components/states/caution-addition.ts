import type { InjectionKey, Ref } from 'vue';

/** Words of the organisation below the fixed caution, provided by the frame around all screens; empty for none. */
export const CAUTION_ADDITION: InjectionKey<Readonly<Ref<string>>> = Symbol('caution addition');
