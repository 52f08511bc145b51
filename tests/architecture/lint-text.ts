import { ESLint } from 'eslint';
import { projectFolder } from '../../server/bootstrap/paths.mjs';

const eslint = new ESLint({ cwd: projectFolder });

/** Messages, each led by its rule, that the project's real lint settings give for a text at that place in the tree. */
export async function lintText(filePath: string, text: string): Promise<string[]> {
  const [result] = await eslint.lintText(text, { filePath });
  return result.messages.map((message) => `${message.ruleId ?? 'parser'}: ${message.message}`);
}

/** The same, of one rule only. */
export async function messagesOf(rule: string, filePath: string, text: string): Promise<string[]> {
  return (await lintText(filePath, text))
    .filter((message) => message.startsWith(`${rule}: `))
    .map((message) => message.slice(rule.length + 2));
}
