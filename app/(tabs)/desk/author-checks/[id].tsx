export { AuthorCheckScreen as default } from "@/features/authorCheck/AuthorCheckScreen";
