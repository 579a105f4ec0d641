export { ConstraintsScreen as default } from "@/features/constraints/ConstraintsScreen";
