import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { CheckRow } from "@/components/CheckRow";
import { Choice } from "@/components/Choice";
import { Field } from "@/components/Field";
import { Block, Caption, Label } from "@/components/Text";
import { inDays, longDay } from "@/components/when";
import { MakeApiTokenDocument } from "~graphql/generated/graphql";
import {
  SCOPE_WORDS,
  TOKEN_DAYS,
  TOKEN_NAME_MAX,
  TOKEN_SCOPES,
  type TokenScope,
} from "~shared/review/tokenScopes";

import { Form } from "./AccountForm";
import { useOutcome } from "./useOutcome";

const DAYS = [7, 30, 90, 180, TOKEN_DAYS.most];
const ADDED = TOKEN_SCOPES.filter((scope) => scope !== "read");

/** What a new token is called, may do, and until when; the password proves who asks. */
export function MakeApiToken({
  onMade,
  onCancel,
}: {
  onMade: (name: string, secret: string) => void;
  onCancel: () => void;
}) {
  const [name, setName] = useState("");
  const [scopes, setScopes] = useState<readonly TokenScope[]>(["read"]);
  const [days, setDays] = useState<number>(TOKEN_DAYS.preset);
  const [password, setPassword] = useState("");
  const [make] = useMutation(MakeApiTokenDocument);
  const outcome = useOutcome<{
    __typename: "MadeApiToken";
    secret: string;
    token: { name: string };
  }>(["name", "days", "password"]);
  const send = async () => {
    const input = { name, scopes: [...scopes], days };
    const made = await outcome.run(
      async () => (await make({ variables: { input, password } })).data?.makeApiToken as never,
    );
    if (made) onMade(made.token.name, made.secret);
  };
  return (
    <Form
      label="Make a token"
      onSubmit={() => void send()}
      problem={outcome.problem}
      problemField={outcome.problemField}
    >
      <Block>A new token</Block>
      <Field
        name="tokenName"
        label="What uses it"
        value={name}
        onChangeText={setName}
        maxLength={TOKEN_NAME_MAX}
        hint="A name for you alone: nightly fits, plotting script."
        error={outcome.at("name")}
      />
      <View>
        <Label>What it may do</Label>
        <Caption>{`${SCOPE_WORDS.read.name}: ${SCOPE_WORDS.read.hint}`}</Caption>
        {ADDED.map((scope) => (
          <CheckRow
            key={scope}
            label={SCOPE_WORDS[scope].name}
            hint={SCOPE_WORDS[scope].hint}
            checked={scopes.includes(scope)}
            onChange={(checked) =>
              setScopes(
                TOKEN_SCOPES.filter((each) => (each === scope ? checked : scopes.includes(each))),
              )
            }
          />
        ))}
      </View>
      <Choice
        label="How long it lasts"
        value={String(days)}
        options={DAYS.map((each) => ({
          value: String(each),
          label: each === TOKEN_DAYS.most ? "A year" : `${each} days`,
        }))}
        onChange={(value) => setDays(Number(value ?? TOKEN_DAYS.preset))}
        hint={`Ends on ${longDay(inDays(days))}.`}
        error={outcome.at("days")}
      />
      <Field
        name="password"
        label="Your password"
        secure
        value={password}
        onChangeText={setPassword}
        autoComplete="current-password"
        error={outcome.at("password")}
        onSubmit={() => void send()}
      />
      <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 12 }}>
        <Button
          kind="filled"
          icon="key-outline"
          label="Make the token"
          busy={outcome.busy}
          onPress={() => void send()}
        />
        <Button label="Cancel" onPress={onCancel} />
      </View>
    </Form>
  );
}
