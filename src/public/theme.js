// Same key as src/app: the theme that this person chose; without one the style sheet follows the system.
try {
  const theme = localStorage.getItem("holdfast.theme");
  if (theme === "light" || theme === "dark") document.documentElement.dataset.theme = theme;
} catch {
  // Storage is switched off: the system's theme holds.
}
