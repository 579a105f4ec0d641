export { IconButton } from "./Button";
