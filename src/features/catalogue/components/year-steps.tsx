import { ChevronLeft, ChevronRight } from "lucide-react";
import { IconButton } from "@/components/ui/icon-button";

/** The year that is shown, and the way to those beside it. */
export const YearSteps = ({ year, onYear }: { year: number; onYear: (year: number) => void }) => (
  <div className="flex items-center gap-1">
    <IconButton label={`Show ${year - 1}`} onClick={() => onYear(year - 1)}><ChevronLeft /></IconButton>
    <span className="min-w-14 text-center text-base font-semibold" aria-live="polite">{year}</span>
    <IconButton label={`Show ${year + 1}`} onClick={() => onYear(year + 1)}><ChevronRight /></IconButton>
  </div>
);
