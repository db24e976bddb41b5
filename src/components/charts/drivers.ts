/** Drivers that have a colour of their own, which they keep everywhere. */
export type DriverColour = "price" | "week" | "temperature" | "promotion" | "trend" | "event";
