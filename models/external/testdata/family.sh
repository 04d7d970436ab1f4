#!/bin/sh
# A simulator that is a script and two processes, both calling at an address.
"$1" leaf "$2" &
"$1" play "$3" "$2"
