import { LogoMark } from "@/components/ui/logo";

/** What stands on the page until its first code has come. */
export const Starting = () => (
  <div role="status" className="flex min-h-dvh items-center justify-center text-accent">
    <LogoMark className="w-12 animate-pulse" />
    <span className="sr-only">Shelftide is starting</span>
  </div>
);
