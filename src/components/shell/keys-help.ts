/** From now on a question mark that is no part of what is typed opens the dialog of KeysHelp. */
export function openKeysByQuestionMark(): void {
  const keys = document.querySelector<HTMLDialogElement>('[data-keys]');
  document.addEventListener('keydown', (event) => {
    const target = event.target;
    const typing =
      target instanceof HTMLElement && target.matches('input, textarea, select, [contenteditable]');
    if (event.key === '?' && !typing && !event.ctrlKey && !event.metaKey && keys && !keys.open) {
      event.preventDefault();
      keys.showModal();
    }
  });
}
