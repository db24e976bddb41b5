export const applesService = "applesService";
