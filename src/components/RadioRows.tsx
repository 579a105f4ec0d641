export { RadioRows } from "./CheckRow";
