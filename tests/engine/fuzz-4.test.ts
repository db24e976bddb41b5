import { expectFuzz } from "./fuzz/fuzz";

expectFuzz(20240214);
