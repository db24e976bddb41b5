export const basis = "basis";
