import fs from 'node:fs';
import path from 'node:path';
import { gzipSync } from 'node:zlib';
import { projectFolder } from '../../../server/bootstrap/paths.mjs';
import { openChromium } from '../../e2e/support/chromium.ts';
import { freshDataFolder, launchProduct } from '../../e2e/support/product.ts';
import { defineBench } from '../harness.ts';

const GOAL_KB = 150;

/** Words that three.js's renderer keeps through minifying: its error messages. */
const THREE_MARK = 'THREE.WebGLRenderer';

interface LoadedFile {
  readonly kind: 'js' | 'css' | 'font';
  readonly gzipBytes: number;
  readonly hasThree: boolean;
}

/** What Chromium really asks for on the way to a usable sign-in form, weighed after gzip. */
export default defineBench({
  name: 'first-page-weight',
  claim: 'JavaScript and CSS of the sign-in page after gzip; three.js is not among them',
  async run({ cleanUp }) {
    const dataFolder = freshDataFolder();
    cleanUp(() => fs.rmSync(dataFolder, { recursive: true, force: true }));
    const product = await launchProduct({ dataFolder });
    cleanUp(() => product.stop());
    const files = await filesOfSignIn(product.address);
    const weight = (kind: LoadedFile['kind']) =>
      files.filter((file) => file.kind === kind).reduce((sum, file) => sum + file.gzipBytes, 0) / 1000;
    const value = weight('js') + weight('css');
    const all = weightOfBuild() / 1000;
    const three = files.filter((file) => file.hasThree).length;
    return {
      value,
      unit: 'kB',
      ratio: value / all,
      baseline: `all JavaScript and CSS of the client: ${all.toFixed(0)} kB`,
      goal: `≤ ${GOAL_KB} kB, without three.js`,
      met: value <= GOAL_KB && three === 0,
      details: [
        { label: 'JavaScript', value: weight('js'), unit: 'kB' },
        { label: 'CSS', value: weight('css'), unit: 'kB' },
        { label: 'fonts (beside the goal)', value: weight('font'), unit: 'kB' },
        { label: 'files', value: files.length, unit: '' },
        { label: 'files with three.js', value: three, unit: '' },
      ],
    };
  },
});

async function filesOfSignIn(address: string): Promise<LoadedFile[]> {
  const browser = await openChromium({ webgl: true });
  try {
    const page = await browser.newPage();
    const files: Promise<LoadedFile | null>[] = [];
    page.on('response', (response) => {
      files.push(response.body().then((body) => weigh(new URL(response.url()).pathname, body)));
    });
    await page.goto(`${address}/sign-in`, { waitUntil: 'networkidle' });
    await page.getByRole('button', { name: 'Sign in' }).waitFor();
    return (await Promise.all(files)).filter((file) => file !== null);
  } finally {
    await browser.close();
  }
}

function weigh(name: string, body: Buffer): LoadedFile | null {
  const kinds: Record<string, LoadedFile['kind'] | undefined> = { '.js': 'js', '.css': 'css', '.woff2': 'font' };
  const kind = kinds[path.extname(name)];
  if (kind === undefined) return null;
  // Fonts are compressed already.
  const gzipBytes = kind === 'font' ? body.length : gzipSync(body).length;
  return { kind, gzipBytes, hasThree: kind === 'js' && body.includes(THREE_MARK) };
}

function weightOfBuild(): number {
  const folder = path.join(projectFolder, 'dist', 'client');
  return fs
    .readdirSync(folder, { recursive: true, encoding: 'utf8' })
    .filter((file) => /\.(js|css)$/.test(file))
    .reduce((sum, file) => sum + gzipSync(fs.readFileSync(path.join(folder, file))).length, 0);
}
