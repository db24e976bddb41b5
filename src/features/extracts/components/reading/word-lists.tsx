import { useState } from "react";
import type { Layout, WordLists as Words } from "@shared/contract/layouts";
import { TextField } from "@/components/ui/text-field";

type Meaning = keyof Words;

const promotionMeanings: readonly { meaning: Meaning; label: string }[] = [
  { meaning: "none", label: "No promotion" },
  { meaning: "feature", label: "Feature: in the leaflet or an advert" },
  { meaning: "display", label: "Display: placed a second time" },
  { meaning: "feature_and_display", label: "Feature and display" },
  { meaning: "price_cut", label: "Price cut" },
  { meaning: "multi_buy", label: "Multi-buy" },
  { meaning: "coupon", label: "Coupon" },
  { meaning: "other", label: "Other promotion" },
];
const yesNo: readonly { meaning: Meaning; label: string }[] = [
  { meaning: "yes", label: "Yes" },
  { meaning: "no", label: "No" },
];

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
      <div className="grid gap-x-6 gap-y-4 border-t border-hairline pt-4 sm:grid-cols-2">{yesNo.map(field)}</div>
    </div>
  );
};

type WordsFieldProps = { label: string; words: readonly string[]; onChange: (words: string[]) => void };

/** Holds what is typed as it is typed, so that a comma can be written before the word behind it. */
const WordsField = ({ label, words, onChange }: WordsFieldProps) => {
  const [text, setText] = useState(words.join(", "));
  return (
    <TextField
      label={label}
      value={text}
      onChange={(event) => {
        setText(event.target.value);
        onChange(wordsOf(event.target.value));
      }}
      onBlur={() => setText(words.join(", "))}
    />
  );
};
