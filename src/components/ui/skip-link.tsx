const linkStyle =
  "fixed top-2 left-2 z-50 -translate-y-16 rounded-sm bg-accent px-3 py-2 font-medium " +
  "text-on-accent focus:translate-y-0";

/** First in the page: takes keyboard users past the navigation. */
export const SkipLink = ({ target }: { target: string }) => (
  <a href={`#${target}`} className={linkStyle}>
    Skip to content
  </a>
);
