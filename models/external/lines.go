package external

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
)

// mostLine is the longest line that a program may write, bytes.
const mostLine = 16 << 20

var (
	errLong = fmt.Errorf("wrote a line of more than %d MB", mostLine>>20)
	errHalf = errors.New("ended in the middle of a line")
)

// line is one line of a program, without its end.
type line struct {
	text []byte
	more bool // more came together with it
}

// readLine reads one line.
func readLine(r *bufio.Reader) (line, error) {
	var text []byte
	for {
		part, err := r.ReadSlice('\n')
		text = append(text, part...)
		switch {
		case len(text) > mostLine:
			return line{}, errLong
		case err == nil:
			return line{text: bytes.TrimRight(text, "\r\n"), more: r.Buffered() > 0}, nil
		case errors.Is(err, bufio.ErrBufferFull):
		case len(text) > 0:
			return line{}, errHalf
		default:
			return line{}, err
		}
	}
}
