export { ReporterScreen as default } from "@/features/errorReports/ReporterScreen";
