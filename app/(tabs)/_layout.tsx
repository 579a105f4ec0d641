export { TabsLayout as default } from "@/layout/TabsLayout";
