export const apiClient = "apiClient";
