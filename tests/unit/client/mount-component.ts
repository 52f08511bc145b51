import { PiniaColada } from '@pinia/colada';
import { createPinia } from 'pinia';
import { type App, type Component, createApp, h, nextTick, reactive } from 'vue';
import { createMemoryHistory, createRouter, type Router } from 'vue-router';

export interface Mounted {
  host: HTMLElement;
  app: App;
  router: Router;
  /** Events by name, in order. */
  emitted: Record<string, unknown[][]>;
  /** Changes properties and waits for the redraw. */
  set: (change: Record<string, unknown>) => Promise<void>;
  query: <E extends Element = HTMLElement>(selector: string) => E;
  unmount: () => void;
}

export interface MountOptions {
  props?: Record<string, unknown>;
  slots?: Record<string, (scope: Record<string, unknown>) => unknown>;
  /** Events whose first argument is written back to the property of the same name (`update:x`). */
  models?: readonly string[];
  events?: readonly string[];
  address?: string;
}

/** Mounts one component with router, stores and query cache in a detached page. */
export async function mountComponent(component: Component, options: MountOptions = {}): Promise<Mounted> {
  const props = reactive<Record<string, unknown>>({ ...options.props });
  const emitted: Record<string, unknown[][]> = {};
  const listeners: Record<string, (...values: unknown[]) => void> = {};
  const listen = (event: string, then?: (value: unknown) => void): void => {
    listeners[`on${event.charAt(0).toUpperCase()}${event.slice(1)}`] = (...values) => {
      (emitted[event] ??= []).push(values);
      then?.(values[0]);
    };
  };
  for (const model of options.models ?? []) listen(`update:${model}`, (value) => (props[model] = value));
  for (const event of options.events ?? []) listen(event);

  const page = { render: () => null };
  const router = createRouter({
    history: createMemoryHistory(),
    routes: [
      { path: '/sign-in', name: 'sign-in', component: page },
      { path: '/scenarios/:slug', name: 'scenario-brief', component: page },
      { path: '/:rest(.*)*', component: page },
    ],
  });
  await router.push(options.address ?? '/');
  const host = document.createElement('div');
  document.body.append(host);
  const app = createApp({ render: () => h(component, { ...props, ...listeners }, options.slots) });
  app.use(createPinia());
  app.use(PiniaColada);
  app.use(router);
  app.mount(host);
  await nextTick();
  return {
    host,
    app,
    router,
    emitted,
    async set(change) {
      Object.assign(props, change);
      await nextTick();
    },
    query<E extends Element = HTMLElement>(selector: string): E {
      const found = host.querySelector<E>(selector);
      if (!found) throw new Error(`nothing matches ${selector} in ${host.innerHTML.slice(0, 400)}`);
      return found;
    },
    unmount() {
      app.unmount();
      host.remove();
    },
  };
}

/** Types into a field as a person does. */
export async function type(field: HTMLInputElement, text: string): Promise<void> {
  field.value = text;
  field.dispatchEvent(new Event('input', { bubbles: true }));
  await nextTick();
}

/** Lets promises and the redraws that follow them run. */
export async function settle(turns = 8): Promise<void> {
  for (let turn = 0; turn < turns; turn += 1) {
    await new Promise((done) => setTimeout(done, 0));
    await nextTick();
  }
}
