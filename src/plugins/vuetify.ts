import type { App } from 'vue';
import { aliases, mdi } from 'vuetify/iconsets/mdi-svg';
import { createVuetify } from 'vuetify';
import 'vuetify/styles/core';
import '../styles/vuetify-theme.css';
import '../styles/vuetify-look.css';

const installed = new WeakSet<App>();

/**
 * Component library with the defaults of the house; brought in with the first part that needs it, so that the sign-in page
 * ships without. Its own theme is off: `styles/vuetify-theme.css` carries the tokens, and nothing injects styles at run time.
 * Components are imported where they are used; nothing is registered globally.
 */
export function installComponentLibrary(app: App): void {
  if (installed.has(app)) return;
  installed.add(app);
  app.use(
    createVuetify({
      theme: false,
      icons: { defaultSet: 'mdi', aliases, sets: { mdi } },
      defaults: {
        global: { ripple: false, elevation: 0, rounded: false },
        VBtn: { variant: 'outlined' },
        VTextField: { variant: 'outlined', density: 'compact', hideDetails: 'auto' },
        VSelect: { variant: 'outlined', density: 'compact', hideDetails: 'auto' },
        VTextarea: { variant: 'outlined', density: 'compact', hideDetails: 'auto' },
        VTable: { density: 'compact' },
        VDataTable: { density: 'compact' },
        VTabs: { height: 36, sliderColor: 'primary' },
        VChip: { label: true, variant: 'outlined' },
        VDialog: { transition: false },
        VMenu: { transition: false },
        VSnackbar: { location: 'bottom left', transition: false, variant: 'flat' },
      },
    }),
  );
}
