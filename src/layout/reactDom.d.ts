/** The one thing the client takes from react-dom itself; its types are not installed. */
declare module "react-dom" {
  import type { ReactNode, ReactPortal } from "react";
  export function createPortal(children: ReactNode, container: Element): ReactPortal;
}
