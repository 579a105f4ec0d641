export { NewSetScreen as default } from "@/features/correlatedSets/NewSetScreen";
