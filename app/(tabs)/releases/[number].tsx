export { ReleaseScreen as default } from "@/features/releases/ReleaseScreen";
