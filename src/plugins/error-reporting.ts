import type { App } from 'vue';
import type { Router } from 'vue-router';

export type Report = (sentence: string) => void;

/** Errors nobody handled: logged whole to the console, told to the person in one sentence. */
export function installErrorReporting(app: App, router: Router, report: Report): void {
  app.config.errorHandler = (error) => {
    console.error(error);
    report('Something in this page failed. Reload it; nothing recorded is lost.');
  };
  router.onError((error: unknown, to) => {
    console.error(error);
    report(
      /dynamically imported module|Importing a module script|preload/i.test(String(error))
        ? `The page ${to.path} could not be loaded. Check the network, or reload to get the present version.`
        : 'That page could not be opened. Reload and try again.',
    );
  });
}
