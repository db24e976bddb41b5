import { Download, Plus, Upload } from "lucide-react";
import { buttonStyle } from "@/components/ui/button-style";
import { Button } from "@/components/ui/button";
import { LinkButton } from "@/components/ui/link-button";
import { paths } from "@/lib/paths";

type CatalogueActionsProps = {
  /** Address and name of the file in our own form. */
  file: { href: string; name: string };
  /** Whether the person may bring a file in and enter things by hand. */
  mayWrite: boolean;
  /** "Enter a store" */
  enter?: { label: string; onEnter: () => void };
};

/** What every part of the catalogue offers: its file out, a file in, and a new entry by hand. */
export const CatalogueActions = ({ file, mayWrite, enter }: CatalogueActionsProps) => (
  <>
    <a href={file.href} download={file.name} className={buttonStyle()}>
      <Download aria-hidden="true" /> Save as CSV
    </a>
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
