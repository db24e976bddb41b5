export const engine = "engine";
