export { Divider } from "./Card";
