import { Ellipsis, FileDown, ImageDown, Table2, ChartSpline } from "lucide-react";
import { Menu, MenuItem } from "@/components/ui/menu";

const triggerStyle =
  "inline-flex size-7 items-center justify-center rounded-sm text-muted transition-colors " +
  "hover:bg-hover hover:text-ink data-[state=open]:bg-hover print:hidden";

type ChartMenuProps = {
  title: string;
  showsTable: boolean;
  onToggleTable: () => void;
  onSavePicture: () => void;
  onSaveCsv: () => void;
};

/** What can be had from a chart: its numbers, a picture, a file. */
export const ChartMenu = ({ title, showsTable, onToggleTable, onSavePicture, onSaveCsv }: ChartMenuProps) => (
  <Menu
    trigger={
      <button type="button" aria-label={`${title}: table, picture or file`} className={triggerStyle}>
        <Ellipsis className="size-4" aria-hidden="true" />
      </button>
    }
  >
    <MenuItem onSelect={onToggleTable}>
      {showsTable ? <ChartSpline aria-hidden="true" /> : <Table2 aria-hidden="true" />}
      {showsTable ? "Show the chart" : "Show the table"}
      <kbd className="ml-auto rounded-xs border border-hairline px-1.5 text-xs text-muted">T</kbd>
    </MenuItem>
    {!showsTable && (
      <MenuItem onSelect={onSavePicture}>
        <ImageDown aria-hidden="true" /> Save as PNG
      </MenuItem>
    )}
    <MenuItem onSelect={onSaveCsv}>
      <FileDown aria-hidden="true" /> Save as CSV
    </MenuItem>
  </Menu>
);
