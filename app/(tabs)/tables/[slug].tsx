export { TableScreen as default } from "@/features/tables/TableScreen";
