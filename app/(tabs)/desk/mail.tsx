export { MailScreen as default } from "@/features/desk/MailScreen";
