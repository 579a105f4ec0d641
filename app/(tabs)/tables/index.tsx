export { TablesScreen as default } from "@/features/tables/TablesScreen";
