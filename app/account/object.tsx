export { ObjectionScreen as default } from "@/features/account/ObjectionScreen";
