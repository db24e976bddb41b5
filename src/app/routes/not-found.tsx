import { EmptyState } from "@/components/ui/empty-state";
import { LinkButton } from "@/components/ui/link-button";
import { Sheet } from "@/components/ui/sheet";
import { paths } from "@/lib/paths";

export const NotFoundRoute = () => (
  <Sheet>
    <EmptyState
      heading="h1"
      title="There is nothing at this address"
      action={<LinkButton to={paths.home.href()}>Go to the start</LinkButton>}
    >
      It may have been removed, or the link has lost a part on its way.
    </EmptyState>
  </Sheet>
);
