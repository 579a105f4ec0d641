import type { MigrationInterface } from "typeorm";

import { Schema1796111633401 } from "./1796111633401-Schema";
import { MethodVocabulary1796130000003 } from "./1796130000003-MethodVocabulary";
import { NamedDataAndLife1796130000004 } from "./1796130000004-NamedDataAndLife";
import { CorrelatedSets1796130000005 } from "./1796130000005-CorrelatedSets";
import { DeskAndAuthorCheck1796130000006 } from "./1796130000006-DeskAndAuthorCheck";
import { Evidence1796130000007 } from "./1796130000007-Evidence";
import { PeopleAndReports1796130000008 } from "./1796130000008-PeopleAndReports";
import { Releases1796130000010 } from "./1796130000010-Releases";
import { TableVersions1796130000011 } from "./1796130000011-TableVersions";
import { TellOwners1796130000012 } from "./1796130000012-TellOwners";
import { ApiTokens1796130000035 } from "./1796130000035-ApiTokens";
import { TablesByVersionOnly1796130000038 } from "./1796130000038-TablesByVersionOnly";

/** Every migration, oldest first. A list, not a glob: it is the same under swc, Jest and build/. */
export const migrations: (new () => MigrationInterface)[] = [
  Schema1796111633401,
  MethodVocabulary1796130000003,
  NamedDataAndLife1796130000004,
  CorrelatedSets1796130000005,
  DeskAndAuthorCheck1796130000006,
  Evidence1796130000007,
  PeopleAndReports1796130000008,
  Releases1796130000010,
  TableVersions1796130000011,
  TellOwners1796130000012,
  ApiTokens1796130000035,
  TablesByVersionOnly1796130000038,
];
