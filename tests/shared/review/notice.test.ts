import { stateFromNotices, type NoticeKind } from "~shared/review/notice";

it.each<[NoticeKind[], string]>([
  [[], "current"],
  [["erratum"], "current"],
  [["superseded", "erratum"], "superseded"],
  [["superseded", "withdrawn"], "withdrawn"],
])("notices %j leave a record %s", (kinds, state) => {
  expect(stateFromNotices(kinds)).toBe(state);
});
