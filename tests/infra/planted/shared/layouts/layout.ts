export const layout = "layout";
