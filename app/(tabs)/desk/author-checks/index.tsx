export { AuthorChecksScreen as default } from "@/features/authorCheck/AuthorChecksScreen";
