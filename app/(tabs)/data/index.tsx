export { DataScreen as default } from "@/features/namedData/DataScreen";
