import type { RouteRecordRaw } from 'vue-router';

export const routes: RouteRecordRaw[] = [
  { path: '/', name: 'start', component: () => import('../views/edges/NotFoundView.vue'), meta: { title: '' } },
  {
    path: '/sign-in',
    name: 'sign-in',
    component: () => import('../views/account/SignInView.vue'),
    meta: { title: 'Sign in', open: true, bare: true },
  },
  {
    path: '/unavailable',
    name: 'unavailable',
    component: () => import('../views/edges/UnavailableView.vue'),
    meta: { title: 'No connection', open: true, bare: true },
  },
  {
    path: '/my-flights',
    name: 'my-flights',
    component: () => import('../views/my-flights/MyFlightsView.vue'),
    meta: { title: 'My flights', area: 'my-flights', roles: ['trainee', 'instructor'], purpose: 'fly scenarios' },
  },
  {
    path: '/fly/:scenarioSlug',
    name: 'fly',
    component: () => import('../views/fly/FlyView.vue'),
    props: true,
    meta: {
      title: 'Fly',
      area: 'my-flights',
      roles: ['trainee', 'instructor'],
      purpose: 'fly scenarios',
      immersive: true,
    },
  },
  {
    path: '/attempts/:id',
    name: 'attempt',
    component: () => import('../views/debrief/DebriefView.vue'),
    props: true,
    meta: { title: 'Debrief', area: 'my-flights' },
  },
  {
    path: '/scenarios',
    name: 'scenarios',
    component: () => import('../views/scenarios/ScenarioListView.vue'),
    meta: { title: 'Scenarios', area: 'scenarios' },
  },
  {
    path: '/scenarios/:slug',
    name: 'scenario-brief',
    component: () => import('../views/scenarios/ScenarioBriefView.vue'),
    props: true,
    meta: { title: 'Brief', area: 'scenarios' },
  },
  {
    path: '/airframes',
    name: 'airframes',
    component: () => import('../views/airframes/AirframeListView.vue'),
    meta: { title: 'Airframes', area: 'airframes', roles: ['engineer', 'instructor'], purpose: 'read airframes' },
  },
  {
    path: '/account',
    name: 'account',
    component: () => import('../views/account/AccountView.vue'),
    meta: { title: 'Profile and preferences' },
  },
  {
    path: '/:address(.*)*',
    name: 'not-found',
    component: () => import('../views/edges/NotFoundView.vue'),
    meta: { title: 'No page here' },
  },
];
