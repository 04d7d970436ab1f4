package remote

import (
	"errors"
	"fmt"
	"net"
	"os"
	"strconv"
	"time"

	"github.com/nats-io/nats-server/v2/server"
)

// Server is a queue of one's own, embedded in this program.
type Server struct {
	nats   *server.Server
	dir    string // JetStream wants one; what is kept in memory leaves nothing there
	token  string
	secure bool
}

// mostQueued bounds what the queue may hold, bytes.
const mostQueued = 512 << 20

// Serve starts a queue that listens at an address, host and port; port 0 is
// any that is free. Any host but loopback demands a token and TLS. It needs a
// Close.
func Serve(address string, a Access) (*Server, error) {
	d, err := readDoor(address)
	if err != nil {
		return nil, err
	}
	token, tokenErr := a.token()
	secure, tlsErr := a.serverTLS()
	if err := errors.Join(tokenErr, tlsErr); err != nil {
		return nil, err
	}
	if !d.loopback && (token == "" || secure == nil) {
		return nil, fmt.Errorf("%s can be reached from other machines, which demands a token and TLS: give --token-file, --tls-cert and --tls-key, or listen at 127.0.0.1", address)
	}
	port := d.port
	if port == 0 {
		port = server.RANDOM_PORT
	}
	// The server says of an address in use only that it is not ready.
	if port > 0 {
		free, err := net.Listen("tcp", net.JoinHostPort(d.host, strconv.Itoa(port)))
		if err != nil {
			return nil, err
		}
		free.Close()
	}
	dir, err := os.MkdirTemp("", "turnwise-queue-")
	if err != nil {
		return nil, err
	}
	s := &Server{dir: dir, token: token, secure: secure != nil}
	s.nats, err = server.NewServer(&server.Options{
		ServerName: "turnwise", Host: d.host, Port: port, Authorization: token, TLSConfig: secure, TLS: secure != nil, TLSTimeout: 5,
		JetStream: true, StoreDir: dir, JetStreamMaxMemory: mostQueued, JetStreamMaxStore: 1 << 20,
		MaxPayload: mostMessage, MaxControlLine: 4096, NoSigs: true, NoLog: true,
	})
	if err != nil {
		os.RemoveAll(dir)
		return nil, err
	}
	s.nats.Start()
	if !s.nats.ReadyForConnections(10 * time.Second) {
		s.Close()
		return nil, fmt.Errorf("the queue does not come up at %s", address)
	}
	return s, nil
}

// URL is where workers find the queue.
func (s *Server) URL() string { return "nats://" + s.nats.Addr().String() }

// Close ends the queue.
func (s *Server) Close() {
	s.nats.Shutdown()
	s.nats.WaitForShutdown()
	os.RemoveAll(s.dir)
}
