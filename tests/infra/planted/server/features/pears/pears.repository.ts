export const pearsRepository = "pearsRepository";
