import fs from 'node:fs';
import path from 'node:path';
import { ESLint } from 'eslint';
import { describe, expect, it } from 'vitest';
import { projectFolder } from '../../server/bootstrap/paths.mjs';
import { filesOfTree, foldersWithFiles, readText } from './tree-files.ts';

describe('the real tree', () => {
  it('keeps every lint rule', async () => {
    const results = await new ESLint({ cwd: projectFolder }).lintFiles('.');
    const errors = results.flatMap((result) =>
      result.messages
        .filter((message) => message.severity === 2)
        .map((message) => `${path.relative(projectFolder, result.filePath)}:${message.line} ${message.message}`),
    );
    expect(errors).toEqual([]);
  });

  it('opens each folder with a README of at least two lines', () => {
    const bare = foldersWithFiles(['src', 'server', 'shared', 'tests', 'tools', 'scenarios']).filter((folder) => {
      const readme = path.join(folder, 'README.md');
      return !fs.existsSync(path.join(projectFolder, readme)) || readText(readme).trim().split('\n').length < 2;
    });
    expect(bare).toEqual([]);
  });

  it('has colours in the design tokens only', () => {
    const colour = /#[0-9a-fA-F]{3,8}\b|\b(?:rgba?|hsla?)\(/;
    const coloured = filesOfTree(['src'])
      .filter((file) => /\.(ts|vue|css)$/.test(file) && !file.includes('tokens'))
      .filter((file) =>
        withoutComments(readText(file))
          .split('\n')
          .some((line) => isColour(line, colour)),
      );
    expect(coloured).toEqual([]);
  });

  it('names no path of this machine', () => {
    const parent = path.dirname(projectFolder);
    const named = filesOfTree(['.'])
      .filter((file) => !/\.(png|woff2?|xlsx|glb|ico)$/.test(file))
      .filter((file) => parent.length > 4 && readText(file).includes(`${parent}/`));
    expect(named).toEqual([]);
  });

  it('pins every package and leaves addresses out of the lock file', () => {
    const { dependencies, devDependencies } = JSON.parse(readText('package.json'));
    const loose = Object.entries({ ...dependencies, ...devDependencies }).filter(
      ([, version]) => !/^\d+\.\d+\.\d+$/.test(String(version)),
    );
    expect(loose).toEqual([]);
    expect(readText('package-lock.json')).not.toContain('"resolved": "http');
  });

  it('has a lock file that npm ci accepts: an entry for every package that another names', () => {
    const lock: { packages: Record<string, LockEntry> } = JSON.parse(readText('package-lock.json'));
    const missing = Object.entries(lock.packages).flatMap(([place, { dependencies, optionalDependencies }]) =>
      Object.keys({ ...dependencies, ...optionalDependencies })
        .filter((name) => !placesAbove(place).some((above) => `${above}node_modules/${name}` in lock.packages))
        .map((name) => `${place || 'package.json'} names ${name}`),
    );
    expect(missing).toEqual([]);
  });

  it('uses odex, ml-matrix and the elementary functions where results must repeat, in their own versions', () => {
    const { dependencies } = JSON.parse(readText('package.json'));
    const repeatable = Object.keys(dependencies).filter((name) => name.startsWith('@stdlib/'));
    const imported = [...readText('shared/numerics/elementary.ts').matchAll(/from '(@stdlib\/[^']+)'/g)].map(
      (m) => m[1],
    );
    expect(imported.sort()).toEqual(repeatable.sort());
  });

  it('gives each bench row a name of its own and a goal', () => {
    const rows = filesOfTree(['tests/bench/rows']).filter((file) => file.endsWith('.bench.ts'));
    const names = rows.flatMap((file) =>
      [...readText(file).matchAll(/name: '([a-z0-9-]+)'/g)].map((match) => match[1]),
    );
    expect(rows.length).toBeGreaterThan(0);
    expect(new Set(names).size).toBe(names.length);
    for (const file of rows) expect(readText(file), file).toMatch(/export default/);
  });
});

interface LockEntry {
  dependencies?: Record<string, string>;
  optionalDependencies?: Record<string, string>;
}

/** Where Node looks for what a package imports: in itself, then upwards. */
function placesAbove(place: string): string[] {
  const places = [''];
  for (let at = place; at !== ''; at = at.replace(/(^|\/)node_modules\/(@[^/]+\/)?[^/]+$/, ''))
    places.unshift(`${at}/`);
  return places;
}

/** An address fragment such as href="#plane" is no colour. */
function isColour(line: string, colour: RegExp): boolean {
  return colour.test(
    line.replace(/(?:href|url|xlink:href|to|for)\s*[=(]\s*["'`(]?#[\w-]+/g, '').replace(/#shared\/\S*/g, ''),
  );
}

function withoutComments(text: string): string {
  return text
    .replace(/\/\*[\s\S]*?\*\//g, '')
    .replace(/<!--[\s\S]*?-->/g, '')
    .replace(/(^|\s)\/\/.*$/gm, '');
}
