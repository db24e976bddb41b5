export const routes = "routes";
