export const shape = "shape";
