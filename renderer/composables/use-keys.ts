import { onBeforeUnmount, onMounted } from 'vue';
import { tinykeys } from 'tinykeys';

/** True while a dialog is open: the keys of the view behind it rest. */
function dialogOpen(): boolean {
  return document.querySelector('[role="dialog"], [role="alertdialog"]') !== null;
}

/** Text is being typed or a list is being chosen from: letters belong to the field. */
function inField(target: EventTarget | null): boolean {
  return (
    target instanceof HTMLElement &&
    (target.isContentEditable ||
      target instanceof HTMLTextAreaElement ||
      target instanceof HTMLSelectElement ||
      (target instanceof HTMLInputElement && !['checkbox', 'radio', 'button'].includes(target.type)))
  );
}

/** Keys of a view, active while it is mounted, at rest in fields and under dialogs. */
export function useKeys(bindings: Readonly<Record<string, (event: KeyboardEvent) => void>>): void {
  let stop: (() => void) | null = null;
  onMounted(() => {
    stop = tinykeys(window, { ...bindings }, { ignore: (event) => inField(event.target) || dialogOpen() });
  });
  onBeforeUnmount(() => stop?.());
}
