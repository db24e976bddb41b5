import { useState } from "react";
import type { Layout, WordLists as Words } from "@shared/contract/layouts";
import { TextField } from "@/components/ui/text-field";
import { promotionMeanings, yesOrNo } from "../../view/word-meanings";
import type { Meaning } from "../../view/word-meanings";

const wordsOf = (text: string): string[] => [...new Set(text.split(",").map((word) => word.trim()).filter((word) => word !== ""))];

/** Which words of the file mean what, where it writes words for promotions or for yes and no. */
export const WordLists = ({ layout, onChange }: { layout: Layout; onChange: (words: Words) => void }) => {
  const field = ({ meaning, label }: { meaning: Meaning; label: string }) => (
    <WordsField
      key={meaning}
      label={label}
      words={layout.words[meaning]}
      onChange={(words) => onChange({ ...layout.words, [meaning]: words })}
    />
  );
  return (
    <div className="flex flex-col gap-4">
      <p className="text-sm text-muted">Words are set apart by commas; capital letters make no difference. A word that stands in no list is listed as an error.</p>
      <div className="grid gap-x-6 gap-y-4 sm:grid-cols-2">{promotionMeanings.map(field)}</div>
      <div className="grid gap-x-6 gap-y-4 border-t border-hairline pt-4 sm:grid-cols-2">{yesOrNo.map(field)}</div>
    </div>
  );
};

type WordsFieldProps = { label: string; words: readonly string[]; onChange: (words: string[]) => void };

/** Holds what is typed as it is typed, so that a comma can be written before the word behind it. */
const WordsField = ({ label, words, onChange }: WordsFieldProps) => {
  const [text, setText] = useState<string | null>(null);
  return (
    <TextField
      label={label}
      value={text ?? words.join(", ")}
      onChange={(event) => {
        setText(event.target.value);
        onChange(wordsOf(event.target.value));
      }}
      onBlur={() => setText(null)}
    />
  );
};
