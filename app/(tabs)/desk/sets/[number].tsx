export { SetDraftScreen as default } from "@/features/correlatedSets/SetDraftScreen";
