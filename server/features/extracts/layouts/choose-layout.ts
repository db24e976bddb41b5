import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Layout } from "@shared/contract/layouts";
import { detectEncoding, detectLayout, headBytes, ownLayout, readHead, recognise, recordsOf, unreadableRows } from "@shared/layouts";
import { UnreadableFile } from "../read/unreadable-file";

/** How a file is read, as its head tells: in our own form, by one of the saved layouts, or as worked out. */
export type Choice =
  | { origin: "own"; layout: Layout }
  | { origin: "saved"; layout: Layout; index: number }
  | { origin: "proposed"; layout: Layout };

type Known = { kind: ExtractKind; saved: readonly Layout[]; weekStart: number };

/** A file with our names whose rows are mostly written otherwise is not in our form. */
const mostUnreadable = 0.5;

/**
 * Chooses how a file is read. Our own form comes first, so that what scripts send is never read by a layout that somebody saved;
 * but where most rows cannot be read so, a saved layout that fits is taken, or one worked out by which more rows can be read.
 *
 * @param head the file's first 64 KiB, unpacked
 * @throws UnreadableFile where it holds no line, or none that ends.
 */
export function chooseLayout(head: Uint8Array, { kind, saved, weekStart }: Known): Choice {
  requireLines(head);
  const own = ownLayoutOf(head, kind);
  const ownUnreadable = own ? unreadableRows(own, head) : 1;
  if (own && ownUnreadable <= mostUnreadable) return { origin: "own", layout: own };
  const recognised = recognise(saved, head, { weekStart });
  if (recognised) return { origin: "saved", layout: recognised.layout, index: recognised.index };
  const { layout } = detectLayout(head, kind, { weekStart });
  return own && !readsMore(layout, own, head) ? { origin: "own", layout: own } : { origin: "proposed", layout };
}

/** Whether more rows can be read by a layout, of all the columns that our own form has. */
function readsMore(layout: Layout, own: Layout, head: Uint8Array): boolean {
  const hasAll = Object.keys(own.mapping).every((column) => Object.hasOwn(layout.mapping, column));
  return hasAll && unreadableRows(layout, head) < unreadableRows(own, head);
}

/** The layout of our own form, where the file is in it. */
export function ownLayoutOf(head: Uint8Array, kind: ExtractKind): Layout | null {
  if (detectEncoding(head).value !== "utf-8") return null;
  const text = readHead(head, "utf-8");
  const [names] = text ? recordsOf(text, ",") : [];
  return names ? ownLayout(kind, names) : null;
}

function requireLines(head: Uint8Array): void {
  const text = readHead(head, detectEncoding(head).value)?.text ?? "";
  if (text.trim() === "") throw new UnreadableFile("no-header", "The file holds no lines. Check the export that made it.");
  if (head.length >= headBytes && !/[\r\n]/.test(text)) {
    throw new UnreadableFile("no-header", "The first line is no header: its quotes do not close, or it does not end.");
  }
}
