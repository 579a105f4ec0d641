import { FAMILY_NAMES, type MethodFamily } from "~shared/methods/vocabulary";
import { Chip } from "./Chip";
import { Marker } from "./Marker";

/** A method family as filter and legend in one. */
export function FamilyChip({
  family,
  selected,
  onPress,
  count,
}: {
  family: MethodFamily;
  selected: boolean;
  onPress: () => void;
  count?: number;
}) {
  return (
    <Chip
      label={FAMILY_NAMES[family]}
      selected={selected}
      onPress={onPress}
      count={count}
      glyph={<Marker family={family} size={16} />}
    />
  );
}
