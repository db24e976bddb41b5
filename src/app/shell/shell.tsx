import { useQueryClient } from "@tanstack/react-query";
import { useEffect, useMemo, useRef } from "react";
import { Navigate, Outlet, useLocation, useNavigation } from "react-router-dom";
import { SkipLink } from "@/components/ui/skip-link";
import { UploadsProvider } from "@/features/extracts/api/uploads";
import { useChain } from "@/lib/chain";
import { ChainFormatContext, createChainFormat, neutralSettings } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";
import { signedOutKey, useSession } from "@/lib/session";
import { TopBar } from "./top-bar";

const contentId = "content";

/** What surrounds every page of someone signed in. */
export const Shell = () => {
  const session = useSession();
  const queryClient = useQueryClient();
  const chain = useChain();
  const location = useLocation();
  const navigation = useNavigation();
  const format = useMemo(() => createChainFormat(chain ?? neutralSettings), [chain]);
  const content = useRef<HTMLElement>(null);
  const firstPath = useRef(location.pathname);

  useEffect(() => {
    // A new page is read from its beginning; the first one keeps the focus the browser gave it.
    if (firstPath.current === location.pathname) return;
    firstPath.current = "";
    window.scrollTo(0, 0);
    content.current?.focus({ preventScroll: true });
  }, [location.pathname]);

  if (!session) {
    const here = queryClient.getQueryData(signedOutKey) ? undefined : `${location.pathname}${location.search}`;
    return <Navigate to={paths.signIn.href(here)} replace />;
  }
  if (session.person.mustChangePassword && location.pathname !== paths.password.path) {
    return <Navigate to={paths.password.href()} replace />;
  }
  return (
    <ChainFormatContext.Provider value={format}>
      <UploadsProvider>
        <SkipLink target={contentId} />
        <TopBar session={session} chainName={chain?.name} />
        {navigation.state === "loading" && (
          <div
            className="fixed inset-x-0 top-0 z-50 h-0.5 animate-pulse bg-accent"
            role="status"
            aria-label="Loading the page"
          />
        )}
        <main
          ref={content}
          id={contentId}
          tabIndex={-1}
          className="mx-auto w-full max-w-[1560px] px-4 pt-6 pb-16 sm:px-7 print:p-0"
        >
          <Outlet />
        </main>
      </UploadsProvider>
    </ChainFormatContext.Provider>
  );
};
