export { DataEntryScreen as default } from "@/features/namedData/DataEntryScreen";
