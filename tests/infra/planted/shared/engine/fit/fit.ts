export const fit = "fit";
