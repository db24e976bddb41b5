export const applesIndex = "applesIndex";
