export { ConfirmScreen as default } from "@/features/account/ConfirmScreen";
