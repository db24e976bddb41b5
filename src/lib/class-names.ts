import { clsx } from "clsx";
import type { ClassValue } from "clsx";
import { twMerge } from "tailwind-merge";

/** Joins class names; where two utilities set the same property the later one wins. */
export const classNames = (...values: ClassValue[]): string => twMerge(clsx(values));
