export { MethodsScreen as default } from "@/features/vocabulary/MethodsScreen";
