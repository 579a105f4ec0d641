export { useLayoutClass, type LayoutClass } from "./useLayoutClass";
