import { ref } from 'vue';
import type { Ref } from 'vue';

export interface Notice {
  readonly id: number;
  readonly message: string;
  /** Offers to take the step back. */
  readonly undo: (() => void) | null;
}

const notice = ref<Notice | null>(null);
let counter = 0;
let timer: ReturnType<typeof setTimeout> | undefined;

/** One line of news at the foot of the window, read out politely; the next one replaces it. */
export function useAnnouncer(): {
  notice: Ref<Notice | null>;
  say: (message: string, undo?: (() => void) | null) => void;
  clear: () => void;
} {
  return {
    notice,
    say(message, undo = null) {
      counter += 1;
      notice.value = { id: counter, message, undo };
      clearTimeout(timer);
      timer = setTimeout(() => (notice.value = null), undo === null ? 6_000 : 12_000);
    },
    clear() {
      notice.value = null;
    },
  };
}
