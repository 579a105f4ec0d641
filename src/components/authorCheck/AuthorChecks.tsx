import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Dense } from "@/components/Text";
import { longDay } from "@/components/when";
import { checkWords, type CheckVerdict } from "~shared/review/authorCheck";

import { AskAuthor } from "./AskAuthor";

interface Mark {
  id: string;
  ordinal: number;
  verdict: CheckVerdict;
  at: string;
  closed: boolean;
}

/** On a record's page: which of its revisions an author of the paper has checked; for editors, the way to ask one. */
export function AuthorChecks({
  number,
  quotable,
  marks,
}: {
  number: string;
  /** The revision in use. */
  quotable: string;
  marks: readonly Mark[];
}) {
  const { may } = useSession();
  const editor = may("readAuthorChecks");
  if (marks.length === 0 && !editor) return null;
  return (
    <View style={{ gap: 4 }}>
      {marks.map(({ id, ordinal, verdict, at, closed }) => {
        const words = checkWords(verdict, longDay(at), closed);
        return (
          <Dense key={id}>
            {`${number}.${ordinal}` === quotable
              ? words
              : words.replace("this revision", `revision ${ordinal}`)}
          </Dense>
        );
      })}
      {editor ? (
        <View>
          <AskAuthor quotable={quotable} />
          {marks.length > 0 ? (
            <View style={{ flexDirection: "row", marginLeft: -12 }}>
              <Button kind="text" label="Author checks" href={`/desk/author-checks?q=${number}`} />
            </View>
          ) : null}
        </View>
      ) : null}
    </View>
  );
}
