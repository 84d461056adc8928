import { createHash } from "node:crypto";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { measureSha256 } from "../../src/core/job/sha256.ts";

const bytes = (text: string) => new TextEncoder().encode(text);

describe("SHA-256", () => {
  // NIST, FIPS 180-4 example values ("SHA256.pdf" of the Cryptographic Standards examples): one block, two blocks;
  // the empty message and a million a's stand in the same agency's test vectors (CAVP SHA-256 short and long messages).
  it.each([
    ["abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"],
    [
      "abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq",
      "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1",
    ],
    ["", "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"],
    ["a".repeat(1_000_000), "cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0"],
  ])("matches the published digest (message %#)", (message, digest) => {
    expect(measureSha256(bytes(message))).toBe(digest);
  });

  it("agrees with the digest of the Node runtime for any length (seed 1)", () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 300 }), (message) => {
        expect(measureSha256(message)).toBe(createHash("sha256").update(message).digest("hex"));
      }),
      { seed: 1, numRuns: 300 },
    );
  });
});
