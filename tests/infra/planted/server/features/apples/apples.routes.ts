export const applesRoutes = "applesRoutes";
