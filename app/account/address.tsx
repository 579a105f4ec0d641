export { AddressScreen as default } from "@/features/account/AddressScreen";
