/* controller_board: what controller_loop.c needs of the board that it runs on. controller_host.c plays the board
   on a computer; another board has a file of its own like it. */
#ifndef CONTROLLER_BOARD_H
#define CONTROLLER_BOARD_H

#include <stdint.h>

/* A tick of the converter's timer without a sample. */
#define CONTROLLER_NO_SAMPLE INT32_MIN

/* From the loop, for the board. */
void controller_tick(int32_t raw); /* the timer's interrupt calls it, 1,000 times a second */

/* From the board, for the loop. */
int board_sleep(void); /* until an interrupt has been served; 0: the power goes */
void board_relay(int tripped);
void board_report(uint64_t sample, float fraction, float value, int is_trip); /* m: at the service plug */
void board_fault(const char *text);

#endif
