/** Which value of the data the person points at: fields tell it, the pane beside them shows its source and history. */
import { inject, type InjectionKey } from 'vue';

export interface AboutValue {
  pointer: string;
  label: string;
}
export type TellAbout = (value: AboutValue) => void;
export const TELL_ABOUT: InjectionKey<TellAbout> = Symbol('value pointed at');

/** Tells what is pointed at; nothing where no pane listens. */
export const useTellAbout = (): TellAbout => inject(TELL_ABOUT, () => undefined);
