import type { Layout, WordLists } from "@shared/contract/layouts";
import type { LayoutPreview } from "@shared/contract/saved-layouts";
import { SelectField } from "@/components/ui/select-field";
import { columnLabel } from "../../view/column-labels";
import { learnWord, unknownWords } from "../../view/word-meanings";

type UnknownWordsProps = { layout: Layout; preview: LayoutPreview; onChange: (words: WordLists) => void };

/** Words of the file that nobody has explained yet: each is asked for by itself. */
export const UnknownWords = ({ layout, preview, onChange }: UnknownWordsProps) => {
  const words = unknownWords(preview, layout);
  if (words.length === 0) return null;
  return (
    <div className="mt-4 rounded-md border border-caution-edge bg-caution-soft p-4">
      <p className="mb-3 text-sm text-caution">
        {words.length === 1 ? "A word of this file is not known yet." : "Some words of this file are not known yet."} Say what{" "}
        {words.length === 1 ? "it means" : "each means"}:
      </p>
      <div className="grid gap-x-6 gap-y-4 sm:grid-cols-2 lg:grid-cols-3">
        {words.map(({ word, column, meanings }) => (
          <SelectField
            key={`${column} ${word}`}
            label={`“${word}” as ${columnLabel(column).toLowerCase()} means`}
            choices={[{ value: "", label: "choose \u2026" }, ...meanings.map(({ meaning, label }) => ({ value: meaning, label }))]}
            value=""
            onChange={(chosen) => {
              const known = meanings.find(({ meaning }) => meaning === chosen);
              if (known) onChange(learnWord(layout.words, word, { meaning: known.meaning, among: meanings }));
            }}
          />
        ))}
      </div>
    </div>
  );
};
