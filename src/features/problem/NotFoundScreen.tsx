import { usePathname } from "expo-router";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { Screen } from "@/layout/Screen";
import { Shell } from "@/layout/Shell";

/** An address that leads nowhere. */
export function NotFoundScreen() {
  const path = usePathname();
  return (
    <Shell>
      <Screen title="Nothing at this address">
        <Empty
          icon="help-circle-outline"
          title="The address may be mistyped"
          text={`There is no page at ${path}. A record has the address /constraints/FL-0042, with its own number.`}
          action={<Button label="Search the constraints" kind="filled" href="/constraints" />}
        />
      </Screen>
    </Shell>
  );
}
