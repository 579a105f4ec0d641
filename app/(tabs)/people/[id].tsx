export { PersonScreen as default } from "@/features/people/PersonScreen";
