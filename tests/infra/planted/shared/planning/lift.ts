export const lift = "lift";
