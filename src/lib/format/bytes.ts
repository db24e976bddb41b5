import { thinSpace } from "./glyphs";
import { formatNumber } from "./number";

const units = ["bytes", "kB", "MB", "GB", "TB"];

/** A file's size in decimal units: "812 bytes", "12.4 MB". */
export const formatBytes = (bytes: number): string => {
  const step = bytes < 1000 ? 0 : Math.min(units.length - 1, Math.floor(Math.log10(bytes) / 3));
  const value = bytes / 1000 ** step;
  return `${formatNumber(value, { digits: step > 0 && value < 100 ? 1 : 0 })}${thinSpace}${units[step]}`;
};
