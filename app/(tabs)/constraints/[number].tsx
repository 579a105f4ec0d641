export { ConstraintScreen as default } from "@/features/constraints/ConstraintScreen";
