import { PiniaColada } from '@pinia/colada';
import { createPinia } from 'pinia';
import { createApp } from 'vue';
import { z } from 'zod';
import './styles/main.css';
import App from './App.vue';
import { installErrorReporting } from './plugins/error-reporting.ts';
import { queryCacheOptions } from './plugins/query-cache.ts';
import { createAppRouter } from './router/app-router.ts';
import { useNoticesStore } from './stores/notices.store.ts';
import { useSessionStore } from './stores/session.store.ts';

// Its faster parsers are built with `new Function`, which the content security policy forbids.
z.config({ jitless: true });

const app = createApp(App);
app.use(createPinia());
app.use(PiniaColada, queryCacheOptions);
const router = createAppRouter(useSessionStore());
installErrorReporting(app, router, (sentence) => useNoticesStore().say(sentence));
app.use(router);
app.mount('#app');
