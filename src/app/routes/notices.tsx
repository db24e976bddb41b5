import type { QueryClient } from "@tanstack/react-query";
import { PageHeader } from "@/components/ui/page-header";
import { noticeChoicesQuery } from "@/features/settings/api/notice-choices";
import { NoticeChoices } from "@/features/settings/components/notice-choices";
import { useSession } from "@/lib/session";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(noticeChoicesQuery());
  return null;
};

export const NoticesRoute = () => {
  const session = useSession();
  return (
    <div className="mx-auto max-w-xl">
      <PageHeader title="Notices" facts={["What Shelftide writes to you about."]} />
      {session && <NoticeChoices email={session.person.email} roles={session.person.roles} />}
    </div>
  );
};
