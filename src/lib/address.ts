/** An address with its query; empty values are left out, lists are joined by commas. */
export const addressOf = (path: string, query: object = {}): string => {
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value === undefined || value === null || value === "") continue;
    if (Array.isArray(value) && value.length === 0) continue;
    search.set(name, Array.isArray(value) ? value.join(",") : String(value));
  }
  const text = search.toString();
  return text ? `${path}?${text}` : path;
};
