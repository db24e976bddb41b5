// Runs before the first paint, so a person's own choice of theme never flashes. Read by src/lib/theme.ts.
try {
  const choice = localStorage.getItem("shelftide-theme");
  if (choice === "light" || choice === "dark") document.documentElement.dataset.theme = choice;
} catch {
  // Storage can be closed to us; the system's theme then applies.
}
