export { RegisterScreen as default } from "@/features/account/RegisterScreen";
