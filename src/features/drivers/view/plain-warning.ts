import { driverOfColumn } from "@shared/planning/driver";
import { driverLabel } from "./driver-words";

const driverOfTerm = (term: string): string => [...new Set(term.split(":").map(driverOfColumn))].join(":");

/** A warning of the fit in the words of this page: drivers by their names, nothing about penalties. */
export const plainWarning = (warning: string): string =>
  warning
    .replace(/^Term "([^"]+)"/, (_, term: string) => driverLabel(driverOfTerm(term)))
    .replace(
      /: the data show (a straight line|no effect); its penalty went to its limit\.$/,
      ": its weeks show $1, and so it is drawn.",
    );
