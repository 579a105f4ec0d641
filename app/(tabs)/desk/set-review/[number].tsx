export { SetReviewScreen as default } from "@/features/correlatedSets/SetReviewScreen";
