import { defineStore } from 'pinia';
import { computed, ref, shallowRef } from 'vue';
import type { ProfileBody } from '#shared/contracts/account.ts';
import type { Me, Role } from '#shared/contracts/session.ts';
import { isApiError } from '../services/api-error.ts';
import { api } from '../services/http-client.ts';
import * as sessionApi from '../services/session-api.ts';
import { setReaderZone } from './reader-zone.ts';

export type SessionState = 'unknown' | 'signed-out' | 'signed-in';

/** Who is signed in here. The tokens themselves are httpOnly cookies that this page never sees. */
export const useSessionStore = defineStore('session', () => {
  const me = shallowRef<Me | null>(null);
  const state = ref<SessionState>('unknown');
  /** True when the server ended a session that was in use, until the next sign-in. */
  const expired = ref(false);
  let restoring: Promise<void> | null = null;

  const roles = computed<readonly Role[]>(() => me.value?.roles ?? []);

  function settle(next: Me | null): void {
    me.value = next;
    setReaderZone(next?.person.timeZone ?? null);
    state.value = next ? 'signed-in' : 'signed-out';
  }

  api.onSessionEnded(() => {
    if (state.value === 'signed-in') expired.value = true;
    settle(null);
  });

  /** Asks once whether a session exists. Rejects when the server cannot be reached; asking again is then possible. */
  function restore(): Promise<void> {
    if (state.value !== 'unknown') return Promise.resolve();
    restoring ??= sessionApi
      .fetchMe()
      .then(settle)
      .finally(() => {
        restoring = null;
      });
    return restoring;
  }

  async function signIn(email: string, password: string): Promise<void> {
    settle(await sessionApi.signIn({ email, password }));
    expired.value = false;
  }

  async function signOut(): Promise<void> {
    try {
      await sessionApi.signOut();
    } catch (error) {
      // A session that the server no longer knows is signed out already.
      if (!isApiError(error) || error.status !== 401) throw error;
    }
    expired.value = false;
    settle(null);
  }

  /** Reads again who is signed in, after something of the organisation has changed. */
  async function reload(): Promise<void> {
    settle(await sessionApi.fetchMe());
  }

  /** Saves what is given of the own profile and keeps the rest. */
  async function saveProfile(change: Partial<ProfileBody>): Promise<void> {
    if (me.value === null) return;
    const { displayName, units, timeZone } = me.value.person;
    settle(await sessionApi.saveProfile({ displayName, units, timeZone, ...change }));
  }

  function hasRole(wanted: readonly Role[]): boolean {
    return wanted.some((role) => roles.value.includes(role));
  }

  return { me, roles, state, expired, restore, signIn, signOut, saveProfile, reload, hasRole };
});
