export const apple = "apple";
