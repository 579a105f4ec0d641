import { describeScreens } from "./support/screens";

describeScreens("wide");
