export { ImportScreen as default } from "@/features/importFile/ImportScreen";
