export { ReportsScreen as default } from "@/features/errorReports/ReportsScreen";
