import type { QueryClient } from "@tanstack/react-query";
import { EmptyState } from "@/components/ui/empty-state";
import { PageHeader } from "@/components/ui/page-header";
import { ChainSettings } from "@/features/settings/components/chain-settings";
import { chainQuery } from "@/lib/chain";
import { usePermission } from "@/lib/session";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(chainQuery());
  return null;
};

export const SettingsRoute = () => {
  const mayChange = usePermission("settings:manage");
  return (
    <div className="mx-auto max-w-3xl">
      <PageHeader title="Chain settings" facts={["They hold for everyone; each change is on record."]} />
      {mayChange ? (
        <ChainSettings />
      ) : (
        <EmptyState title="For administrators">An administrator of the chain can change its settings.</EmptyState>
      )}
    </div>
  );
};
