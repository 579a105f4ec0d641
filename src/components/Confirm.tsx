export { Confirm } from "./Sheet";
