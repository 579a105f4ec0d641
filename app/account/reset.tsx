export { ResetScreen as default } from "@/features/account/ResetScreen";
