import { may, type Role } from "@/lib/roles/roles";
import type { NavItem } from "./main-nav";

/** The rooms that these roles may enter; without a lab there are none. */
export function toNavItems(roles: readonly Role[]): NavItem[] {
  if (!may(roles, "see")) return [];
  return [
    { href: "/series", label: "Series" },
    { href: "/compare", label: "Compare" },
    { href: "/published", label: "Published" },
    { href: "/loudspeakers", label: "Loudspeakers" },
    { href: "/members", label: "Lab", also: ["/lab"] },
  ];
}
