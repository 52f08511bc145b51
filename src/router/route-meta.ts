import 'vue-router';
import type { Role } from '#shared/contracts/session.ts';
import type { AreaName } from './areas.ts';

declare module 'vue-router' {
  interface RouteMeta {
    /** Title of the window, before "Sidewash". */
    title: string;
    /** Opens without a session. */
    open?: boolean;
    /** Drawn without bar and navigation. */
    bare?: boolean;
    /** Who may open it; everyone signed in when absent. */
    roles?: readonly Role[];
    /** What those roles may do here, for the page that refuses: "edits airframes". */
    purpose?: string;
    /** Area marked on the navigation ruler. */
    area?: AreaName;
    /** On a phone the navigation at the foot is left out. */
    immersive?: boolean;
  }
}
