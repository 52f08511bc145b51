import fs from 'node:fs';
import type { TestProject } from 'vitest/node';
import { launchProduct } from './product.ts';

declare module 'vitest' {
  interface ProvidedContext {
    /** Address of the product that the whole run shares; its data folder began empty. */
    address: string;
    dataFolder: string;
  }
}

/** One real product for the whole end-to-end run, started as `npm start` does, with an empty data folder. */
export default async function setUp(project: TestProject): Promise<() => Promise<void>> {
  const product = await launchProduct();
  project.provide('address', product.address);
  project.provide('dataFolder', product.dataFolder);
  return async () => {
    await product.stop();
    fs.rmSync(product.dataFolder, { recursive: true, force: true });
  };
}
