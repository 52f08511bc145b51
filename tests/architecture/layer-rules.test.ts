import { describe, expect, it } from 'vitest';
import { messagesOf } from './lint-text.ts';

/** importing file, specifier, part of the complaint */
const REFUSED: readonly (readonly [string, string, string])[] = [
  // shared: order, packages, purity of its surroundings
  ['shared/units/angles.ts', '../numerics/matrix.ts', 'the order is'],
  ['shared/numerics/matrix.ts', '../model/plant.ts', 'the order is'],
  ['shared/model/plant.ts', '../analysis/modes.ts', 'the order is'],
  ['shared/analysis/modes.ts', '../scenario/run.ts', 'the order is'],
  ['shared/scenario/run.ts', '../contracts/session.ts', 'the order is'],
  ['shared/model/plant.ts', '../../src/stores/session.store.ts', 'shared only'],
  ['shared/model/plant.ts', '../../server/config/log.ts', 'shared only'],
  ['shared/model/plant.ts', '#shared/units/angles.ts', 'relative path'],
  ['shared/model/plant.ts', 'node:fs', 'may not import node:fs'],
  ['shared/model/plant.ts', 'vue', 'may not import the package vue'],
  ['shared/model/plant.ts', 'odex', 'one home: shared/numerics/'],
  ['shared/analysis/modes.ts', 'ml-matrix', 'one home: shared/numerics/'],
  ['shared/model/plant.ts', 'mathjs', 'one home: shared/scenario/'],
  ['shared/analysis/modes.ts', 'zod', 'one home'],
  ['shared/numerics/matrix.ts', '@stdlib/math-base-special-sin', 'one home: shared/numerics/elementary.ts'],
  // worlds
  ['src/services/session-api.ts', '../../server/config/log.ts', 'src may import src and shared only'],
  ['server/http/session.router.ts', '../../src/services/session-api.ts', 'server may import'],
  ['src/stores/session.store.ts', '../../tests/support/people.ts', 'not tests/'],
  ['server/services/people.ts', '../../tests/support/people.ts', 'not tests/'],
  ['src/stores/session.store.ts', '../../shared/units/angles.ts', '#shared/units/angles.ts'],
  ['src/stores/session.store.ts', 'node:fs', 'runs in the browser'],
  // rooms of the client
  ['src/features/fly/clock.ts', '../../views/fly/FlyView.vue', 'src/features may not import'],
  ['src/stores/session.store.ts', '../features/fly/clock.ts', 'src/stores may not import'],
  ['src/services/session-api.ts', '../stores/session.store.ts', 'src/services may not import'],
  ['src/services/session-api.ts', '../runner/fixed-clock.ts', 'src/services may not import'],
  ['src/runner/fixed-clock.ts', '../stores/session.store.ts', 'src/runner may not import'],
  ['src/components/SheetPane.vue', '../stores/session.store.ts', 'src/components may not import'],
  ['src/components/SheetPane.vue', '../services/session-api.ts', 'src/components may not import'],
  ['src/composables/useTick.ts', '../runner/fixed-clock.ts', 'src/composables may not import'],
  ['src/stage/FlightStage.vue', '../features/fly/clock.ts', 'src/stage may not import'],
  ['src/odds/things.ts', '../stores/session.store.ts', 'no room of the layout'],
  // rooms of the server
  ['server/http/session.router.ts', '../data/data-source.ts', 'server/http may not import'],
  ['server/realtime/class.handlers.ts', '../data/data-source.ts', 'server/realtime may not import'],
  ['server/services/people.ts', '../http/session.router.ts', 'server/services may not import'],
  ['server/data/data-source.ts', '../services/people.ts', 'server/data may not import'],
  ['server/mail/outbox.ts', '../data/data-source.ts', 'server/mail may not import'],
  ['server/reports/calendar.ts', '../services/people.ts', 'server/reports may not import'],
  ['server/config/log.ts', '../data/data-source.ts', 'server/config may not import'],
  ['server/services/people.ts', '../bootstrap/ports.mjs', 'server/services may not import'],
  ['server/bootstrap/start.mjs', '../config/log.ts', 'server/bootstrap may not import'],
  ['server/bootstrap/start.mjs', 'zod', 'before anything is installed'],
  // one home per package
  ['src/components/Plane.vue', 'three', 'one home: src/stage/'],
  ['src/features/fly/clock.ts', 'three/examples/jsm/controls/OrbitControls.js', 'one home: src/stage/'],
  ['src/views/fly/FlyView.vue', '@tresjs/core', 'one home: src/stage/'],
  ['src/stores/live.store.ts', 'socket.io-client', 'one home: src/services/'],
  ['src/views/debrief/DebriefView.vue', 'uplot', 'one home: src/components/charts/'],
  ['src/views/analysis/PlanePlot.vue', 'echarts', 'one home: src/components/charts/'],
  ['server/services/people.ts', 'typeorm', 'one home: server/data/'],
  ['server/services/people.ts', 'express', 'one home: server/http/'],
  ['server/services/people.ts', 'socket.io', 'one home: server/realtime/'],
  ['server/http/session.router.ts', 'jsonwebtoken', 'one home: server/services/'],
  ['server/services/people.ts', 'nodemailer', 'one home: server/mail/'],
];

const ALLOWED: readonly (readonly [string, string])[] = [
  ['shared/contracts/attempts.ts', '../scenario/run-types.ts'],
  ['shared/scenario/run.ts', '../model/plant.ts'],
  ['shared/model/airframe-schema.ts', 'zod'],
  ['shared/numerics/elementary.ts', '@stdlib/math-base-special-sin'],
  ['src/views/fly/FlyView.vue', '../../services/attempts-api.ts'],
  ['src/stage/FlightStage.vue', 'three'],
  ['src/services/session-api.ts', '#shared/contracts/session.ts'],
  ['src/stores/session.store.ts', '../services/session-api.ts'],
  ['server/app.ts', './data/data-source.ts'],
  ['server/http/session.router.ts', '../services/permissions.ts'],
  ['server/services/people.ts', '../data/data-source.ts'],
  ['server/config/token-secret.ts', 'node:fs'],
  ['tests/unit/anything.test.ts', '../../server/data/data-source.ts'],
];

describe('who may import whom', () => {
  it.each(REFUSED)('%s may not import %s', async (file, specifier, complaint) => {
    const messages = await messagesOf('sidewash/layers', file, inFile(file, `import { x } from '${specifier}';\nx();`));
    expect(messages).toHaveLength(1);
    expect(messages[0]).toContain(complaint);
  });

  it.each(ALLOWED)('%s may import %s', async (file, specifier) => {
    expect(await messagesOf('sidewash/layers', file, inFile(file, `import { x } from '${specifier}';\nx();`))).toEqual(
      [],
    );
  });

  it.each([
    ['a type', "import type { X } from '../../services/session-api.ts';\nexport const y = (x: X) => x;"],
    ['an import() type', "export type Y = import('../../services/session-api.ts').X;"],
    ['a dynamic import', "export const load = () => import('../../services/session-api.ts');"],
    ['a re-export', "export { x } from '../../services/session-api.ts';\nexport const y = 1;"],
    ['a re-export of everything', "export * from '../../services/session-api.ts';\nexport const y = 1;"],
  ])('%s counts as an import', async (_what, text) => {
    expect(await messagesOf('sidewash/layers', 'src/components/plate/plate-scene.ts', text)).toHaveLength(1);
  });

  it('a comment cannot switch a rule off', async () => {
    const text =
      "// eslint-disable-next-line sidewash/layers\nimport { x } from '../../services/session-api.ts';\nx();";
    expect(await messagesOf('sidewash/layers', 'src/components/plate/plate-scene.ts', text)).toHaveLength(1);
  });
});

function inFile(file: string, code: string): string {
  return file.endsWith('.vue') ? `<script setup lang="ts">\n${code}\n</script>\n<template><p>x</p></template>\n` : code;
}
