import { ref, shallowRef, type Ref, type ShallowRef } from 'vue';

/** Something that is fetched: the value, whether it is under way, and the sentence of a failure. */
export interface Load<T> {
  readonly value: ShallowRef<T | null>;
  readonly busy: Ref<boolean>;
  readonly error: Ref<string | null>;
  /** Fetches (again); an older answer that comes late is dropped. */
  readonly run: () => Promise<void>;
}

export function useLoad<T>(fetch: () => Promise<T>): Load<T> {
  const value = shallowRef<T | null>(null);
  const busy = ref(false);
  const error = ref<string | null>(null);
  let latest = 0;
  async function run(): Promise<void> {
    const own = ++latest;
    busy.value = true;
    try {
      const result = await fetch();
      if (own === latest) {
        value.value = result;
        error.value = null;
      }
    } catch (fault) {
      if (own === latest) error.value = fault instanceof Error ? fault.message : String(fault);
    } finally {
      if (own === latest) busy.value = false;
    }
  }
  return { value, busy, error, run };
}
