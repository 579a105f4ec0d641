export { HistoryScreen as default } from "@/features/history/HistoryScreen";
