export { ReportScreen as default } from "@/features/errorReports/ReportScreen";
