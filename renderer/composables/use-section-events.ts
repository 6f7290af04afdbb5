import { onBeforeUnmount, onMounted } from 'vue';
import type { AppEvent } from '../../shared-core/contract/index.ts';
import { onAppEvent } from '../api/client.ts';

/** Told of changes and jobs of one section (of all where none is given); bursts arrive at most every quarter of a second. */
export function useSectionEvents(sectionId: () => number | null, listener: (event: AppEvent) => void): void {
  let stop: (() => unknown) | null = null;
  let timer: ReturnType<typeof setTimeout> | undefined;
  let waiting: AppEvent | null = null;
  onMounted(() => {
    stop = onAppEvent((event) => {
      const own = sectionId();
      if (own !== null && event.sectionId !== own) return;
      waiting = event;
      timer ??= setTimeout(() => {
        timer = undefined;
        const last = waiting;
        waiting = null;
        if (last !== null) listener(last);
      }, 250);
    });
  });
  onBeforeUnmount(() => {
    stop?.();
    clearTimeout(timer);
  });
}
