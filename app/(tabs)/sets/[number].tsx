export { SetScreen as default } from "@/features/correlatedSets/SetScreen";
