globalThis.fog = "lifted";
