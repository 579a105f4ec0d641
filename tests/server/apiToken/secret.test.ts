import { hashOf, isWellFormed, newSecret, startOf, TOKEN_LENGTH } from "~server/apiToken/secret";

describe("a token's secret", () => {
  it("has a prefix of our own that a search for leaks can look for, and one length", () => {
    for (let i = 0; i < 200; i += 1) {
      const secret = newSecret();
      expect(secret).toMatch(/^fgl_[0-9a-hjkmnp-tv-z]{56}$/);
      expect(secret).toHaveLength(TOKEN_LENGTH);
      expect(isWellFormed(secret)).toBe(true);
    }
  });

  it("differs each time, in every place of its 256 bits", () => {
    const secrets = Array.from({ length: 400 }, newSecret);
    expect(new Set(secrets).size).toBe(400);
    // The first character holds one bit, the other 51 hold five: 1 + 51 · 5 = 256.
    for (let place = 4; place < 56; place += 1) {
      expect(new Set(secrets.map((secret) => secret[place])).size).toBe(place === 4 ? 2 : 32);
    }
  });

  it("betrays a slip of one character without a look-up, but for one in a million", () => {
    const secret = newSecret();
    let passed = 0;
    for (let place = 4; place < secret.length; place += 1) {
      for (const other of "0123456789abcdefghjkmnpqrstvwxyz") {
        if (other === secret[place]) continue;
        const slip = secret.slice(0, place) + other + secret.slice(place + 1);
        if (isWellFormed(slip)) passed += 1;
      }
    }
    // 56 · 31 = 1736 slips, each passed by a check of 20 bits with 1 in 1,048,576: two have odds of 1e-6.
    expect(passed).toBeLessThan(2);
  });

  it.each([
    ["cut off", (secret: string) => secret.slice(0, -1)],
    ["with something behind it", (secret: string) => `${secret}0`],
    ["in capitals", (secret: string) => secret.toUpperCase()],
    ["without its prefix", (secret: string) => secret.slice(4)],
    ["empty", () => ""],
    ["a line break behind it", (secret: string) => `${secret.slice(0, -1)}\n`],
  ])("is no token when %s", (_how, change) => {
    expect(isWellFormed(change(newSecret()))).toBe(false);
  });

  it("is kept as SHA-256, and shown by four of its characters", () => {
    // FIPS 180-4, the example message "abc".
    expect(hashOf("abc")).toBe("ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    const secret = newSecret();
    expect(startOf(secret)).toBe(secret.slice(0, 8));
  });
});
