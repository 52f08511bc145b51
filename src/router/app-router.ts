import { createRouter, createWebHistory, type Router, type RouterHistory } from 'vue-router';
import './route-meta.ts';
import { decide, type GuardSession } from './guards.ts';
import { routes } from './routes.ts';

export interface RouterSession extends GuardSession {
  restore: () => Promise<void>;
}

/** `session` is asked once, before the first page; a server that cannot be reached leads to the page that says so. */
export function createAppRouter(session: RouterSession, history: RouterHistory = createWebHistory()): Router {
  const router = createRouter({
    history,
    routes,
    scrollBehavior: (to, from, saved) => saved ?? (to.path === from.path ? {} : { top: 0 }),
  });
  router.beforeEach(async (to) => {
    if (to.name === 'unavailable') return true;
    try {
      await session.restore();
    } catch {
      return { name: 'unavailable', query: { return: to.fullPath }, replace: true };
    }
    return decide(to, session);
  });
  router.afterEach((to, _from, failure) => {
    if (failure) return;
    document.title = to.meta.title ? `${to.meta.title} · Sidewash` : 'Sidewash';
  });
  return router;
}
