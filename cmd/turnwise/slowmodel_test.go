package main

import (
	"bufio"
	"encoding/json"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"time"
)

// slowModel is a simulator for the tests of interruption, a program of its
// own: it takes a random, unseeded time of up to SLOW_MS milliseconds a
// question, and appends a line for each question it answers to SLOW_LOG.
// Designs of fewer than SLOW_FAIL turns fail.
func slowModel() {
	log, err := os.OpenFile(os.Getenv("SLOW_LOG"), os.O_APPEND|os.O_CREATE|os.O_WRONLY, 0o644)
	if err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
	most, _ := strconv.ParseFloat(os.Getenv("SLOW_MS"), 64)
	fails, _ := strconv.ParseFloat(os.Getenv("SLOW_FAIL"), 64)
	fmt.Println(`{"protocol":1,"name":"slow","version":"1"}`)
	in := bufio.NewScanner(os.Stdin)
	in.Buffer(nil, 1<<20)
	for in.Scan() {
		var q struct {
			ID     int `json:"id"`
			Design struct {
				Turns    float64   `json:"turns"`
				Diameter []float64 `json:"diameter_m"`
				Spacing  []float64 `json:"spacing_m"`
			} `json:"design"`
			Hz []float64 `json:"hz"`
		}
		if err := json.Unmarshal(in.Bytes(), &q); err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
		time.Sleep(time.Duration(rand.Float64() * most * float64(time.Millisecond)))
		fmt.Fprintf(log, "%v %v\n", q.Design, q.Hz)
		if q.Design.Turns < fails {
			fmt.Printf(`{"id":%d,"error":"too few turns for this model"}`+"\n", q.ID)
			continue
		}
		var samples []map[string]any
		for _, hz := range q.Hz {
			lambda := 299792458 / hz
			c := math.Pi * q.Design.Diameter[0] / lambda
			gain := 1 + 10*q.Design.Turns*q.Design.Spacing[0]/lambda*math.Exp(-20*(c-1.1)*(c-1.1))
			samples = append(samples, map[string]any{
				"hz": hz, "port_ohm": []float64{140 * c, 30}, "efficiency": 1, "directivity": gain,
				"gain": map[string]float64{"right": gain * 0.999, "left": gain * 0.001},
			})
		}
		answer, _ := json.Marshal(map[string]any{"id": q.ID, "samples": samples})
		os.Stdout.Write(append(answer, '\n'))
	}
}
