export const solve = "solve";
