export { MineScreen as default } from "@/features/desk/MineScreen";
