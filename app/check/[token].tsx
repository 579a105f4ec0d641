export { CheckLinkScreen as default } from "@/features/authorCheck/CheckLinkScreen";
