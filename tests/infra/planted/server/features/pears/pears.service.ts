export const pearsService = "pearsService";
