/** Worker: both runs of a scenario at once, then the spread of waiting events, then the reaction budget. */
import {
  type PreviewAnswer,
  type PreviewQuestion,
  eventWindows,
  previewBudget,
  previewRuns,
} from './scenario-preview.ts';

self.addEventListener('message', (event: MessageEvent<PreviewQuestion>) => {
  const question = event.data;
  const answer = (part: PreviewAnswer): void => self.postMessage(part);
  try {
    answer(previewRuns(question));
    answer({ id: question.id, part: 'windows', windows: eventWindows(question) });
    answer(previewBudget(question));
  } catch (error) {
    answer({
      id: question.id,
      part: 'refused',
      message: error instanceof Error ? error.message : 'the preview failed',
    });
  }
});
