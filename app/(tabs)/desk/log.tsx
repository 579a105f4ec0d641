export { EventLogScreen as default } from "@/features/desk/EventLogScreen";
