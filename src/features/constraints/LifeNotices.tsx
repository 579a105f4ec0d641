import { View } from "react-native";

import { Button } from "@/components/Button";
import { Notice } from "@/components/Notice";
import { Caption, Dense } from "@/components/Text";
import { dateTime } from "@/components/when";
import { space } from "@/theme/tokens";
import type { NoticePartsFragment } from "~graphql/generated/graphql";

import { noticeTitle } from "./life";

/** Banners over a record: every notice that holds, with who, when, why, and what stands in its place. */
export function LifeNotices({
  notices,
  onTakeBack,
}: {
  notices: readonly NoticePartsFragment[];
  /** For who may take a notice back. */
  onTakeBack?: (notice: NoticePartsFragment) => void;
}) {
  const open = notices.filter(({ endedAt }) => endedAt === null);
  if (open.length === 0) return null;
  return (
    <View style={{ gap: space.xs }}>
      {open.map((notice) => (
        <Notice
          key={notice.id}
          grade={notice.kind === "withdrawn" ? "error" : "caution"}
          title={noticeTitle(notice)}
          action={
            notice.replacedBy || onTakeBack ? (
              <>
                {notice.replacedBy ? (
                  <Button
                    label={`Go to ${notice.replacedBy}`}
                    kind="tonal"
                    icon="arrow-right"
                    href={`/constraints/${notice.replacedBy}`}
                  />
                ) : null}
                {onTakeBack ? (
                  <Button
                    label="Take this back"
                    kind="text"
                    icon="undo"
                    onPress={() => onTakeBack(notice)}
                  />
                ) : null}
              </>
            ) : undefined
          }
        >
          <Dense>{notice.reason}</Dense>
          <Caption>
            Recorded by {notice.by}, {dateTime(notice.at)}
          </Caption>
        </Notice>
      ))}
    </View>
  );
}
