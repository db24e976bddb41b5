export const pearsRoutes = "pearsRoutes";
