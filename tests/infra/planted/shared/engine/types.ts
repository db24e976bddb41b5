export const types = "types";
