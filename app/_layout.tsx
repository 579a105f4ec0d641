export { RootLayout as default } from "@/layout/RootLayout";
export { BrokenPage as ErrorBoundary } from "@/features/problem/BrokenPage";
