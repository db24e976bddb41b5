import { Download, FileDown, Plus, Upload } from "lucide-react";
import { buttonStyle } from "@/components/ui/button-style";
import { Button } from "@/components/ui/button";
import { LinkButton } from "@/components/ui/link-button";
import { Menu, MenuItem } from "@/components/ui/menu";
import { paths } from "@/lib/paths";

/** A file in our own form, by its address. */
type CatalogueFile = { label: string; href: string; name: string };

type CatalogueActionsProps = {
  files: readonly CatalogueFile[];
  /** Whether the person may bring a file in and enter things by hand. */
  mayWrite: boolean;
  /** "Enter a store" */
  enter?: { label: string; onEnter: () => void };
};

/** What every part of the catalogue offers: its files out, a file in, and a new entry by hand. */
export const CatalogueActions = ({ files, mayWrite, enter }: CatalogueActionsProps) => (
  <>
    <SaveFiles files={files} />
    {mayWrite && (
      <LinkButton to={paths.extracts.href()}>
        <Upload aria-hidden="true" /> Upload a file
      </LinkButton>
    )}
    {mayWrite && enter && (
      <Button tone="primary" onClick={enter.onEnter}>
        <Plus aria-hidden="true" /> {enter.label}
      </Button>
    )}
  </>
);

const SaveFiles = ({ files }: { files: readonly CatalogueFile[] }) => {
  const [first, ...more] = files;
  if (more.length === 0) {
    return (
      <a href={first.href} download={first.name} className={buttonStyle()}>
        <Download aria-hidden="true" /> Save as CSV
      </a>
    );
  }
  return (
    <Menu trigger={<Button><Download aria-hidden="true" /> Save as CSV</Button>}>
      {files.map((file) => (
        <MenuItem key={file.name} onSelect={() => fetchFile(file)}>
          <FileDown aria-hidden="true" /> {file.label}
        </MenuItem>
      ))}
    </Menu>
  );
};

/** A menu holds no links, so one is pressed for it. */
const fetchFile = ({ href, name }: CatalogueFile): void => {
  const link = document.createElement("a");
  link.href = href;
  link.download = name;
  link.click();
};
