import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { type Browser, chromium } from 'playwright-core';
import { CHROMIUM, ensureProgram } from '../../../server/bootstrap/debian-packages.mjs';

export interface BrowserOptions {
  /** false: started so that no page gets a WebGL context. */
  readonly webgl: boolean;
}

/** A real headless Chromium; as root without its sandbox, which root may not use. Close it yourself. */
export async function openChromium({ webgl }: BrowserOptions): Promise<Browser> {
  const executablePath = await ensureProgram(CHROMIUM, { say: (text) => console.log(text) });
  return chromium.launch({
    executablePath,
    chromiumSandbox: false,
    env: { ...process.env, HOME: writableHome() },
    args: [
      // Software WebGL is fastest this way; without it, 2-D canvases fall on to the software GPU.
      '--disable-gpu',
      ...(webgl ? [] : ['--disable-3d-apis']),
      '--no-first-run',
      '--disable-quic',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}

/** Chromium wants to write below HOME; a user without one gets a folder in the temporary folder. */
function writableHome(): string {
  try {
    fs.accessSync(os.homedir(), fs.constants.W_OK);
    return os.homedir();
  } catch {
    return fs.mkdtempSync(path.join(os.tmpdir(), 'sidewash-home-'));
  }
}
