/** Brings a field into view and puts the focus into it, once its section is open. */
export function revealField(path: string): void {
  requestAnimationFrame(() =>
    requestAnimationFrame(() => {
      const field = document.querySelector<HTMLElement>(`[data-path="${CSS.escape(path)}"]`);
      const note = document.querySelector<HTMLElement>(".setup .err");
      const target = field ?? note;
      target?.scrollIntoView({ block: "center" });
      field?.focus({ preventScroll: true });
    }),
  );
}
