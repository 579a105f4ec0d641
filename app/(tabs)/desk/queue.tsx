export { QueueScreen as default } from "@/features/desk/QueueScreen";
