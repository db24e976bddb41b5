import { capitalised } from "@/lib/format/capitalised";

/** A name for the layout of a file's source: its file's name without days, weeks and numbers. */
export const suggestName = (fileName: string): string => {
  const plain = fileName
    .replace(/\.(csv|txt)?(\.gz)?$/i, "")
    .replace(/[\d_.-]+/g, " ")
    .replace(/\b(week|wk|kw|w|until|to|bis)\b/gi, " ")
    .replace(/\s+/g, " ")
    .trim();
  const name = plain.length < 3 ? "New source" : plain;
  return capitalised(name).slice(0, 80);
};
