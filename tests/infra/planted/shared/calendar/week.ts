export const week = "week";
