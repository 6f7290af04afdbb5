import { computed, ref, watchEffect } from 'vue';
import type { ComputedRef, Ref } from 'vue';

export type ThemeChoice = 'light' | 'dark' | 'system';

const choice = ref<ThemeChoice>('system');
const systemDark = ref(false);
let watching = false;

function begin(): void {
  watching = true;
  const query = window.matchMedia('(prefers-color-scheme: dark)');
  systemDark.value = query.matches;
  query.addEventListener('change', (event) => (systemDark.value = event.matches));
  watchEffect(
    () => {
      document.documentElement.dataset['theme'] = resolved();
    },
    { flush: 'sync' },
  );
}

function resolved(): 'light' | 'dark' {
  if (choice.value === 'system') return systemDark.value ? 'dark' : 'light';
  return choice.value;
}

/** Light or dark: the person's choice, or the system's. The document carries it as `data-theme`. */
export function useTheme(): { theme: ComputedRef<'light' | 'dark'>; choice: Ref<ThemeChoice> } {
  if (!watching) begin();
  return { theme: computed(resolved), choice };
}
