export const pearsIndex = "pearsIndex";
