export const pear = "pear";
