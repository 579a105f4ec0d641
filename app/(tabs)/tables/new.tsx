export { TableBuilderScreen as default } from "@/features/tables/TableBuilderScreen";
