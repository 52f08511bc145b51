import { aliases, mdi } from 'vuetify/iconsets/mdi-svg';
import { createVuetify } from 'vuetify';

/**
 * Component defaults of the house. The theme is off: `styles/vuetify-theme.css` carries the tokens, so that nothing
 * injects styles at run time. Components are imported where they are used; nothing is registered globally.
 */
export function createComponentLibrary() {
  return createVuetify({
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
  });
}
