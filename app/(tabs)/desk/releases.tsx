export { CutReleaseScreen as default } from "@/features/releases/CutReleaseScreen";
