import { describe, expect, it } from 'vitest';
import { lintText, messagesOf } from './lint-text.ts';

const RULE = 'sidewash/shared-purity';

describe('purity of shared', () => {
  it.each([
    ['Math.sin', 'export const y = (x: number) => Math.sin(x);'],
    ['Math.pow', 'export const y = (x: number) => Math.pow(x, 2);'],
    ['Math.PI', 'export const y = Math.PI;'],
    ['Math.hypot', 'export const y = (x: number) => Math.hypot(x, 1);'],
    ['chance', 'export const y = () => Math.random();'],
    ['Math taken apart', 'const { sin } = Math;\nexport const y = sin;'],
    ['Math by a computed name', "export const y = (name: 'sin') => Math[name](1);"],
    ['Math handed on', 'export const y = (m: Math = Math) => m;'],
    ['the power operator', 'export const y = (x: number) => x ** 2;'],
    ['the power assignment', 'export const y = (x: number) => {\n  let z = x;\n  z **= 2;\n  return z;\n};'],
    ['the clock', 'export const y = () => new Date();'],
    ['the clock as a number', 'export const y = () => Date.now();'],
    ['the performance clock', 'export const y = () => performance.now();'],
    ['a timer', 'export const y = (f: () => void) => setTimeout(f, 1);'],
    ['the DOM', 'export const y = () => document.title;'],
    ['local storage', "export const y = () => localStorage.getItem('x');"],
    ['the network', "export const y = () => fetch('/api');"],
    ['Node', 'export const y = () => process.env.HOME;'],
    ['the console', "export const y = () => console.log('x');"],
    ['everything global', 'export const y = () => globalThis;'],
    ['the machine language', 'export const y = (x: number) => x.toLocaleString();'],
    ['hidden state', 'let count = 0;\nexport const y = () => ++count;'],
    ['exported hidden state', 'export let count = 0;'],
  ])('refuses %s', async (_what, text) => {
    expect(await messagesOf(RULE, 'shared/scenario/sample-file.ts', text)).not.toEqual([]);
  });

  it('takes exact Math members, typed arrays, and local variables that bear a global name', async () => {
    const text = [
      'export function y(x: Float64Array, document: { title: string }): number {',
      '  let sum = 0;',
      '  for (let i = 0; i < x.length; i++) sum += Math.sqrt(Math.abs(x[i])) + Math.max(0, Math.floor(x[i]));',
      '  return document.title.length + sum;',
      '}',
    ].join('\n');
    expect(await lintText('shared/scenario/sample-file.ts', text)).toEqual([]);
  });

  it('binds shared only', async () => {
    expect(await messagesOf(RULE, 'server/services/sample-file.ts', 'export const y = () => Date.now();')).toEqual([]);
  });
});
