import { describeScreens } from "./support/screens";

describeScreens("phone");
