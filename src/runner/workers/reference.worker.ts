/** Worker: answers one question with the reference pilot's run. */
import { flyReference } from './reference-run.ts';
import type { ReferenceAnswer, ReferenceQuestion } from './reference-types.ts';

self.addEventListener('message', (event: MessageEvent<ReferenceQuestion>) => {
  const question = event.data;
  let answer: ReferenceAnswer;
  try {
    answer = { id: question.id, ok: true, run: flyReference(question) };
  } catch (error) {
    answer = {
      id: question.id,
      ok: false,
      message: error instanceof Error ? error.message : 'the reference run failed',
    };
  }
  self.postMessage(answer);
});
