// Writes known answers of Philox4x32-10 from the authors' own library, Random123
// (J. Salmon et al., SC11 2011; Debian package librandom123-dev).
// Run: g++ -O1 test/golden/sampling/philox.cpp -o /tmp/philox && /tmp/philox > test/golden/sampling/philox.json
#include <Random123/philox.h>
#include <cstdio>

int main() {
  const unsigned cases[][6] = {
      {0, 0, 0, 0, 0, 0},
      {~0u, ~0u, ~0u, ~0u, ~0u, ~0u},
      {0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344, 0xa4093822, 0x299f31d0},
      {1, 0, 0, 0, 0xdeadbeef, 0x12345678},
      {0x80000000, 1, 0, 0, 0x80000001, 0x7fffffff},
      {12345, 0, 0, 7, 42, 0},
  };
  const int n = sizeof cases / sizeof cases[0];
  std::printf("[\n");
  for (int i = 0; i < n; i++) {
    const unsigned *c = cases[i];
    philox4x32_ctr_t counter = {{c[0], c[1], c[2], c[3]}};
    philox4x32_key_t key = {{c[4], c[5]}};
    philox4x32_ctr_t out = philox4x32_R(10, counter, key);
    std::printf("  { \"counter\": [%u, %u, %u, %u], \"key\": [%u, %u], \"out\": [%u, %u, %u, %u] }%s\n", c[0], c[1], c[2],
                c[3], c[4], c[5], out[0], out[1], out[2], out[3], i + 1 < n ? "," : "");
  }
  std::printf("]\n");
}
