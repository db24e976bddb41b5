import { Menu as MenuIcon, X } from "lucide-react";
import { useState } from "react";
import { Link, NavLink, useLocation, useNavigate } from "react-router-dom";
import type { Session } from "@shared/contract/accounts";
import { IconButton } from "@/components/ui/icon-button";
import { LogoMark } from "@/components/ui/logo";
import { UploadsUnderWay } from "@/features/extracts/components/upload/uploads-under-way";
import { PersonMenu } from "@/features/accounts/components/person-menu";
import { classNames } from "@/lib/class-names";
import { paths } from "@/lib/paths";
import { navigation } from "./navigation";

const linkStyle = ({ isActive }: { isActive: boolean }) =>
  classNames(
    "inline-flex h-8 items-center rounded-sm px-3 font-medium transition-colors",
    isActive ? "bg-accent-soft text-ink" : "text-muted hover:bg-hover hover:text-ink",
  );

const Links = () =>
  navigation.map(({ label, to }) => (
    <li key={to}>
      <NavLink to={to} className={linkStyle}>
        {label}
      </NavLink>
    </li>
  ));

type TopBarProps = { session: Session; chainName?: string };

export const TopBar = ({ session, chainName }: TopBarProps) => {
  const { pathname } = useLocation();
  const navigate = useNavigate();
  const [openAt, setOpenAt] = useState<string | null>(null);
  // Going anywhere closes the list: it is open for the page it was opened on.
  const isOpen = openAt === pathname;
  return (
    <header className="border-b border-hairline bg-sheet print:hidden">
      <div className="mx-auto flex h-14 w-full max-w-[1560px] items-center gap-3 px-4 sm:px-7">
        <IconButton
          label={isOpen ? "Close the list of pages" : "Pages"}
          aria-expanded={isOpen}
          aria-controls="pages"
          className="-ml-2 md:hidden"
          onClick={() => setOpenAt(isOpen ? null : pathname)}
        >
          {isOpen ? <X /> : <MenuIcon />}
        </IconButton>
        <Link to={paths.home.href()} className="flex items-center gap-2 rounded-sm pr-1 md:mr-4">
          <LogoMark className="w-7 text-accent" />
          <span className="text-lg font-semibold tracking-[-0.015em]">Shelftide</span>
        </Link>
        <nav aria-label="Pages" className="max-md:hidden">
          <ul className="flex gap-1">
            <Links />
          </ul>
        </nav>
        <div className="ml-auto flex min-w-0 items-center gap-3">
          <UploadsUnderWay />
          {chainName && <span className="truncate text-muted max-sm:hidden">{chainName}</span>}
          <PersonMenu
            person={session.person}
            onChangePassword={() => void navigate(paths.password.href())}
            onNotices={() => void navigate(paths.notices.href())}
            onSettings={session.permissions.includes("settings:manage") ? () => void navigate(paths.settings.href()) : undefined}
          />
        </div>
      </div>
      <nav id="pages" aria-label="Pages" hidden={!isOpen} className="border-t border-hairline px-3 py-2 md:hidden">
        <ul className="flex flex-col gap-1 [&_a]:h-11 [&_a]:w-full">
          <Links />
        </ul>
      </nav>
    </header>
  );
};
