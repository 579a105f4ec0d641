export { NotFoundScreen as default } from "@/features/problem/NotFoundScreen";
