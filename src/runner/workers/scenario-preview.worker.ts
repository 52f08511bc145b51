/** Worker: both runs of a scenario at once, then the spread of waiting events. A newer question ends the one before. */
import { type PreviewAnswer, type PreviewQuestion, previewParts } from './scenario-preview.ts';

let newest = 0;

/** Lets waiting messages in; a timer would wait for milliseconds each time. */
const breath = new MessageChannel();
const breathe = (): Promise<void> =>
  new Promise((resolve) => {
    breath.port1.onmessage = () => resolve();
    breath.port2.postMessage(null);
  });

async function answer(question: PreviewQuestion): Promise<void> {
  newest = question.id;
  const tell = (part: PreviewAnswer): void => self.postMessage(part);
  try {
    for (const part of previewParts(question)) {
      if (part) tell(part);
      await breathe();
      if (newest !== question.id) return;
    }
  } catch (error) {
    const message = error instanceof Error ? error.message : 'the preview failed';
    tell({ id: question.id, part: 'refused', message });
  }
}

self.addEventListener('message', (event: MessageEvent<PreviewQuestion>) => void answer(event.data));
