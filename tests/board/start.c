/* Vectors and first instructions of a Cortex-M, for board.ld: nothing of a C library. The emulator clears RAM. */
#include "programs.h"

extern uint32_t board_stack_top, board_data, board_data_end, board_ram_used;
extern const uint32_t board_data_kept;
void board_reset(void);
void board_fault(void);
void board_end(int failed);

__attribute__((section(".vectors"), used)) static const void *const vectors[16] = {
    &board_stack_top, (const void *)board_reset, (const void *)board_fault, (const void *)board_fault};

void board_reset(void)
{
#ifdef __ARM_FP
    *(volatile uint32_t *)0xe000ed88 |= 0xfu << 20; /* coprocessors 10 and 11: the floating-point unit */
    __asm__ volatile("dsb\n\tisb");
#endif
    const volatile uint32_t *from = &board_data_kept;
    for (volatile uint32_t *to = &board_data; to < &board_data_end; ++to)
        *to = *from++;
    const uint32_t guard = 0x5a5a5a5au; /* below the stack */
    *(volatile uint32_t *)&board_ram_used = guard;
    program();
    board_end(*(volatile uint32_t *)&board_ram_used != guard);
}

void board_fault(void)
{
    board_end(1);
}

/* Semihosting (Arm, Semihosting for AArch32 and AArch64): SYS_EXIT, ADP_Stopped_ApplicationExit or _RunTimeError */
void board_end(int failed)
{
    register uintptr_t operation __asm__("r0") = 0x18, argument __asm__("r1") = failed ? 0x20023 : 0x20026;
    for (;;)
        __asm__ volatile("bkpt 0xab" : "+r"(operation) : "r"(argument) : "memory");
}
