package external

import (
	"bufio"
	"context"
	"encoding/json"
	"fmt"
	"math"
	"net"
	"os"
	"os/signal"
	"slices"
	"strings"
	"syscall"
	"testing"
	"time"
)

// The test binary is also the example simulator, the second process that a
// simulator starts, and a program that uses a simulator.
func TestMain(m *testing.M) {
	Guard()
	if len(os.Args) > 2 {
		switch os.Args[1] {
		case "play":
			play(os.Args[2], os.Args[3:])
		case "leaf":
			call(os.Args[2])
			select {}
		case "host":
			host(os.Args[2:])
		}
	}
	// Under the race detector the simulators would each take a second to end.
	os.Setenv("GORACE", "atexit_sleep_ms=0")
	os.Exit(m.Run())
}

// binary is the test binary.
func binary(t testing.TB) string {
	t.Helper()
	path, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	return path
}

// example is the command of the example simulator in one of its moods.
func example(t testing.TB, mood string, args ...string) []string {
	return append([]string{binary(t), "play", mood}, args...)
}

// host is a program that uses a simulator and is killed amid it.
func host(command []string) {
	p, err := Start(context.Background(), command, Options{})
	if err == nil {
		_, err = simulate(p, 4)
	}
	fmt.Println("answered:", err)
	_, _ = simulate(p, deadly+1)
	select {}
}

// call connects to an address; the connection lives as long as the process.
func call(address string) {
	c, err := net.Dial("tcp", address)
	if err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(6)
	}
	calls = append(calls, c)
}

var calls []net.Conn

// wire is a question as the example simulator reads it. It knows nothing of
// the package but the protocol.
type wire struct {
	ID     int64 `json:"id"`
	Design struct {
		Turns      float64   `json:"turns"`
		Spacing    []float64 `json:"spacing_m"`
		Handedness string    `json:"handedness"`
	} `json:"design"`
	Hz      []float64 `json:"hz"`
	Outputs []string  `json:"outputs"`
	Cone    float64   `json:"cone_rad"`
}

// deadly is the number of turns above which a mood shows.
const deadly = 50

const greeting = `{"protocol":1,"name":"example","version":"1","outputs":["cone","cuts","balance","spread","pattern"]}`

// play is the example simulator: it answers everything out of a formula made
// up for it, until a design of more than deadly turns brings out its mood.
func play(mood string, args []string) {
	fmt.Println(greet(mood, args))
	if mood == "deaf" {
		select {}
	}
	for in := bufio.NewReader(os.Stdin); ; {
		text, err := in.ReadBytes('\n')
		if err != nil {
			break
		}
		var q wire
		if err := json.Unmarshal(text, &q); err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(5)
		}
		answer := reply(&q)
		if q.Design.Turns > deadly {
			answer = moody(mood, args, &q, answer)
		}
		fmt.Println(answer)
		if mood == "tired" {
			break
		}
	}
	if mood == "stubborn" {
		select {}
	}
	os.Exit(0)
}

// greet is the hello, or what there is in its place.
func greet(mood string, args []string) string {
	switch mood {
	case "stubborn", "polite":
		signal.Ignore(os.Interrupt, syscall.SIGTERM)
		call(args[0])
	case "mute":
		select {}
	case "stillborn":
		fmt.Fprintln(os.Stderr, "no licence was found")
		os.Exit(4)
	case "greets":
		return args[0]
	case "changes":
		if !first(args[0]) {
			return strings.Replace(greeting, `"version":"1"`, `"version":"2"`, 1)
		}
	}
	return greeting
}

// first reports whether a file was not there, and makes it.
func first(path string) bool {
	f, err := os.OpenFile(path, os.O_CREATE|os.O_EXCL, 0o600)
	if err != nil {
		return false
	}
	f.Close()
	return true
}

// moody spoils an answer, or does something else altogether.
func moody(mood string, args []string, q *wire, good string) string {
	switch mood {
	case "crashes":
		count, _ := os.OpenFile(args[0], os.O_CREATE|os.O_APPEND|os.O_WRONLY, 0o600)
		_, _ = count.WriteString("x")
		for i := range 5000 {
			fmt.Fprintln(os.Stderr, "step", i)
		}
		fmt.Fprint(os.Stderr, "the matrix is singular")
		os.Exit(3)
	case "crashes once", "changes":
		if mood == "changes" || first(args[0]) {
			os.Exit(3)
		}
	case "is killed":
		me, _ := os.FindProcess(os.Getpid())
		_ = me.Kill()
		select {}
	case "hangs", "stubborn":
		fmt.Fprintln(os.Stderr, "iteration 1")
		select {}
	case "half":
		fmt.Print(good[:len(good)/2])
		os.Exit(0)
	case "huge":
		for chunk := strings.Repeat("0", 1<<16); ; {
			fmt.Print(chunk)
		}
	case "closes":
		os.Stdout.Close()
		select {}
	case "noise":
		return "solving …\n" + good
	case "NaN":
		return strings.Replace(good, `"directivity":`, `"directivity":NaN,"was":`, 1)
	case "missing":
		return strings.Replace(good, `"efficiency":0.9,`, ``, 1)
	case "wrong id":
		return strings.Replace(good, `"id":`, `"id":1000`, 1)
	case "no id":
		return strings.Replace(good, `"id":`, `"number":`, 1)
	case "twice":
		return good + "\n" + good
	case "refuses":
		return fmt.Sprintf(`{"id":%d,"error":"the mesh does not close"}`, q.ID)
	case "afterthought":
		fmt.Println(good)
		time.Sleep(20 * time.Millisecond)
		return "done in 0.02 s"
	}
	return good
}

// reply is a sound answer.
func reply(q *wire) string {
	var samples []string
	for _, hz := range q.Hz {
		samples = append(samples, replyAt(q, hz))
	}
	return fmt.Sprintf(`{"id":%d,"samples":[%s],"warnings":["made up"]}`, q.ID, strings.Join(samples, ","))
}

func replyAt(q *wire, hz float64) string {
	x := 1 + q.Design.Turns*q.Design.Spacing[0]*hz/3e8
	both := func(co float64) string {
		right, left := co, co/100
		if q.Design.Handedness == "left" {
			right, left = left, right
		}
		return fmt.Sprintf(`{"right":%v,"left":%v}`, right, left)
	}
	var b strings.Builder
	add := func(output, format string, a ...any) {
		if output == "" || slices.Contains(q.Outputs, output) {
			fmt.Fprintf(&b, ","+format, a...)
		}
	}
	fmt.Fprintf(&b, `{"hz":%v,"port_ohm":[%v,%v],"efficiency":0.9`, hz, 100+x, -x)
	add("", `"gain":%s,"directivity":%v`, both(x), x*1.2)
	add("cone", `"edge_gain":%s,"cone_axial_ratio_db":{"right":%v,"left":60}`, both(x*math.Cos(q.Cone)), 1+q.Cone)
	add("cuts", `"peak_directivity":%v,"beamwidth_rad":%v,"sidelobe_db":-11.5`, x*1.2, 1/x)
	add("balance", `"power_balance":1.001`)
	add("spread", `"spread_port_ohm":[%v,%v]`, 101+x, -x)
	add("pattern", `"pattern":[{"plane_rad":0,"rays":[{"angle_rad":0,"gain":%s}]}]`, both(x))
	return b.String() + "}"
}
