/* SPDX-License-Identifier: GPL-3.0-or-later */
/* SHA-256 of a text, by Nettle: what a report's manifest says of each file. */
#include <nettle/sha2.h>

#include "binding.h"

/* sha256(text): its digest in hexadecimal, as sha256sum writes it. */
static int sha256(lua_State *L) {
  size_t length;
  const char *text = luaL_checklstring(L, 1, &length);
  struct sha256_ctx context;
  uint8_t digest[SHA256_DIGEST_SIZE];
  sha256_init(&context);
  sha256_update(&context, length, (const uint8_t *)text);
  sha256_digest(&context, sizeof digest, digest);
  static const char digits[] = "0123456789abcdef";
  char written[2 * sizeof digest];
  for (size_t i = 0; i < sizeof digest; i++) written[2 * i] = digits[digest[i] >> 4], written[2 * i + 1] = digits[digest[i] & 15];
  lua_pushlstring(L, written, sizeof written);
  return 1;
}

void lac_open_digest(lua_State *L) {
  lua_pushcfunction(L, sha256);
  lua_setfield(L, -2, "sha256");
}
