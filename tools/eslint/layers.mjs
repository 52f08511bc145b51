import path from 'node:path';

/**
 * Who may import whom, as one table: DEVELOPERS.md says the same in words. Paths are relative to the project, with
 * forward slashes.
 */

/** Top-level folders that hold code, and which of them each may import. */
const WORLDS = {
  shared: ['shared'],
  src: ['src', 'shared'],
  server: ['server', 'shared', 'package.json'],
  tests: ['tests', 'server', 'src', 'shared', 'tools', 'scenarios', 'package.json', '*'],
  tools: ['tools'],
};

/** Inside shared: lower rooms come first; a room imports itself and lower ones. */
const SHARED_ORDER = ['units', 'numerics', 'model', 'analysis', 'scenario', 'contracts'];

/** Inside src: which rooms each room may import besides itself. Files directly in src may import every room. */
const CLIENT_ROOMS = {
  views: [
    'features',
    'stores',
    'services',
    'runner',
    'components',
    'composables',
    'stage',
    'router',
    'styles',
    'assets',
  ],
  features: ['stores', 'services', 'runner', 'components', 'composables', 'stage', 'router', 'styles', 'assets'],
  stores: ['services', 'runner'],
  services: [],
  runner: ['services'],
  components: ['composables', 'stage', 'styles', 'assets'],
  composables: [],
  stage: ['components', 'composables', 'styles', 'assets'],
  router: ['views', 'features', 'stores', 'services'],
  plugins: ['stores', 'services', 'components', 'composables', 'styles', 'assets'],
  styles: ['assets'],
  assets: [],
};

/** Inside server: the same. Files directly in server (main.ts, app.ts) may import every room but bootstrap. */
const SERVER_ROOMS = {
  http: ['services', 'config'],
  realtime: ['services', 'config'],
  services: ['data', 'mail', 'reports', 'config'],
  data: ['config'],
  mail: ['config'],
  reports: ['config'],
  config: [],
  cli: ['services', 'data', 'mail', 'reports', 'config', 'bootstrap'],
  bootstrap: [],
};

/** Packages with one home: only files below these prefixes (or these files) import them. */
const PACKAGE_HOMES = [
  { packages: ['three', '@tresjs/core'], homes: ['src/stage/'] },
  { packages: ['socket.io-client'], homes: ['src/services/'] },
  { packages: ['uplot'], homes: ['src/components/charts/'] },
  { packages: ['echarts'], homes: ['src/components/charts/', 'server/reports/'] },
  { packages: ['idb'], homes: ['src/runner/'] },
  { packages: ['typeorm', 'mysql2'], homes: ['server/data/'] },
  { packages: ['reflect-metadata'], homes: ['server/data/', 'server/main.ts', 'server/app.ts'] },
  {
    packages: ['express', 'cookie-parser', 'helmet', 'express-rate-limit', 'multer'],
    homes: ['server/http/', 'server/app.ts'],
  },
  { packages: ['vite'], homes: ['server/http/', 'server/app.ts', 'server/main.ts'] },
  { packages: ['socket.io', '@socket.io/redis-adapter', 'ioredis'], homes: ['server/realtime/'] },
  { packages: ['nodemailer', 'smtp-server'], homes: ['server/mail/'] },
  { packages: ['pdfkit', 'exceljs', 'ical-generator', 'qrcode', 'fflate'], homes: ['server/reports/'] },
  { packages: ['jsonwebtoken', 'bcryptjs'], homes: ['server/services/'] },
  { packages: ['pino'], homes: ['server/config/'] },
];

/** Packages that shared may use, and where in it. Nothing else may be imported there. */
const SHARED_PACKAGES = [
  { packages: ['odex', 'ml-matrix'], homes: ['shared/numerics/'] },
  { packages: ['@stdlib/*'], homes: ['shared/numerics/elementary.ts'] },
  { packages: ['mathjs'], homes: ['shared/scenario/'] },
  { packages: ['zod'], homes: ['shared/model/', 'shared/scenario/', 'shared/contracts/'] },
];

/**
 * Why a file may not import that; null when it may.
 * @param {string} file importing file
 * @param {string} specifier as written
 * @returns {string | null}
 */
export function layerProblem(file, specifier) {
  const world = file.split('/')[0];
  if (!(world in WORLDS)) return null;
  const target = resolveInside(file, specifier);
  return target === null ? packageProblem(file, specifier) : placeProblem(file, target, specifier);
}

/**
 * Path of the imported file inside the project; null for a package.
 * @param {string} file
 * @param {string} specifier
 * @returns {string | null}
 */
export function resolveInside(file, specifier) {
  const bare = specifier.replace(/\?.*$/, '');
  if (bare.startsWith('#shared/')) return path.posix.normalize(bare.slice(1));
  if (bare.startsWith('.')) return path.posix.join(path.posix.dirname(file), bare);
  return null;
}

/**
 * @param {string} file
 * @param {string} target
 * @param {string} specifier
 */
function placeProblem(file, target, specifier) {
  const [world, room] = file.split('/');
  const [targetWorld, targetRoom] = target.split('/');
  const worlds = WORLDS[/** @type {keyof typeof WORLDS} */ (world)];
  if (!worlds.includes(targetWorld) && !worlds.includes('*')) {
    return `${world} may import ${worlds.join(' and ')} only, not ${target}.`;
  }
  if (world === 'shared' && specifier.startsWith('#')) return 'Inside shared, import by relative path.';
  if (world !== 'shared' && targetWorld === 'shared' && !specifier.startsWith('#shared/')) {
    return `Import shared code as #shared/${target.slice('shared/'.length)}.`;
  }
  if (targetWorld !== world || isInRoot(file)) return null;
  if (world === 'shared') return sharedProblem(room, targetRoom);
  if (world === 'src') return roomProblem(CLIENT_ROOMS, world, room, target);
  if (world === 'server') return roomProblem(SERVER_ROOMS, world, room, target);
  return null;
}

/**
 * @param {string} room
 * @param {string} targetRoom
 */
function sharedProblem(room, targetRoom) {
  const from = SHARED_ORDER.indexOf(room);
  const to = SHARED_ORDER.indexOf(targetRoom);
  if (from >= to && to >= 0) return null;
  return `shared/${room} may not import shared/${targetRoom}: the order is ${[...SHARED_ORDER].reverse().join(' → ')}.`;
}

/**
 * @param {Record<string, string[]>} rooms
 * @param {string} world
 * @param {string} room
 * @param {string} target
 */
function roomProblem(rooms, world, room, target) {
  const allowed = rooms[room];
  const targetRoom = isInRoot(target) ? target : target.split('/')[1];
  if (allowed === undefined) return `${world}/${room} is no room of the layout; see DEVELOPERS.md.`;
  if (targetRoom === room || allowed.includes(targetRoom)) return null;
  const list = allowed.length === 0 ? 'no other room' : allowed.join(', ');
  return `${world}/${room} may not import ${target}: of ${world} it may import ${list}.`;
}

/** @param {string} file */
function isInRoot(file) {
  return file.split('/').length === 2;
}

/**
 * @param {string} file
 * @param {string} specifier
 */
function packageProblem(file, specifier) {
  const world = file.split('/')[0];
  if (world === 'tests' || world === 'tools') return null;
  const isNode = specifier.startsWith('node:');
  if (file.startsWith('server/bootstrap/')) {
    return isNode ? null : `server/bootstrap runs before anything is installed: no packages, so not ${specifier}.`;
  }
  if (isNode) {
    return world === 'server' ? null : `${world} runs in the browser: it may not import ${specifier}.`;
  }
  const name = packageName(specifier);
  if (world === 'shared') {
    const entry = homeOf(SHARED_PACKAGES, name);
    if (entry === undefined) return `shared may not import the package ${name}.`;
    return entry.homes.some((home) => file.startsWith(home)) ? null : homeMessage(name, entry.homes);
  }
  const entry = homeOf(PACKAGE_HOMES, name);
  if (entry === undefined || entry.homes.some((home) => file.startsWith(home))) return null;
  return homeMessage(name, entry.homes);
}

/**
 * @param {{ packages: string[], homes: string[] }[]} table
 * @param {string} name
 */
function homeOf(table, name) {
  return table.find((entry) =>
    entry.packages.some((known) => (known.endsWith('/*') ? name.startsWith(known.slice(0, -1)) : known === name)),
  );
}

/**
 * @param {string} name
 * @param {string[]} homes
 */
function homeMessage(name, homes) {
  return `The package ${name} has one home: ${homes.join(' or ')}.`;
}

/** @param {string} specifier */
function packageName(specifier) {
  const parts = specifier.split('/');
  return specifier.startsWith('@') ? parts.slice(0, 2).join('/') : parts[0];
}
