export const applesRepository = "applesRepository";
