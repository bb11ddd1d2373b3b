#include "seal.h"

/* CRC-32 of ISO 3309 / ITU-T V.42 bit by bit, in another way than the library's; its check value, of the nine
   digits, stands in the catalogue of R. N. Williams, A painless guide to CRC error detection algorithms, 1993
   (from memory). */
uint32_t checksum(const unsigned char *bytes, size_t count)
{
    uint32_t crc = 0xffffffffu;
    for (size_t i = 0; i < count; ++i) {
        uint32_t byte = 0; /* reflected, then worked from the top */
        for (int bit = 0; bit < 8; ++bit)
            byte |= (uint32_t)(bytes[i] >> bit & 1) << (31 - bit);
        crc ^= byte;
        for (int bit = 0; bit < 8; ++bit)
            crc = crc << 1 ^ (crc >> 31 != 0 ? 0x04c11db7u : 0);
    }
    uint32_t reflected = 0;
    for (int bit = 0; bit < 32; ++bit)
        reflected |= (crc >> bit & 1) << (31 - bit);
    return ~reflected;
}

void seal(unsigned char *bytes, size_t count)
{
    const uint32_t sum = checksum(bytes, count - 4);
    for (int i = 0; i < 4; ++i)
        bytes[count - 4 + (size_t)i] = (unsigned char)(sum >> 8 * i);
}
