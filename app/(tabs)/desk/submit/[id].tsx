export { SubmitScreen as default } from "@/features/submission/SubmitScreen";
