package remote

import (
	"bytes"
	"context"
	"crypto/ecdsa"
	"crypto/elliptic"
	"crypto/rand"
	"crypto/x509"
	"crypto/x509/pkix"
	"encoding/pem"
	"fmt"
	"io"
	"math/big"
	"net"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/nats-io/nats-server/v2/server"

	"turnwise/models"
)

// paper writes files into a folder of the test's.
type paper struct {
	t   *testing.T
	dir string
}

func (p paper) write(name string, text []byte) string {
	p.t.Helper()
	name = filepath.Join(p.dir, name)
	if err := os.WriteFile(name, text, 0o600); err != nil {
		p.t.Fatal(err)
	}
	return name
}

// certificate writes a certificate for loopback that is its own authority.
func (p paper) certificate(name string) (cert, key string) {
	p.t.Helper()
	private, err := ecdsa.GenerateKey(elliptic.P256(), rand.Reader)
	if err != nil {
		p.t.Fatal(err)
	}
	c := &x509.Certificate{
		SerialNumber: big.NewInt(1), Subject: pkix.Name{CommonName: name}, NotBefore: time.Now().Add(-time.Hour), NotAfter: time.Now().Add(time.Hour),
		IPAddresses: []net.IP{net.IPv4(127, 0, 0, 1)}, IsCA: true, BasicConstraintsValid: true,
		KeyUsage: x509.KeyUsageDigitalSignature | x509.KeyUsageCertSign, ExtKeyUsage: []x509.ExtKeyUsage{x509.ExtKeyUsageServerAuth, x509.ExtKeyUsageClientAuth},
	}
	der, err := x509.CreateCertificate(rand.Reader, c, c, &private.PublicKey, private)
	if err != nil {
		p.t.Fatal(err)
	}
	secret, err := x509.MarshalPKCS8PrivateKey(private)
	if err != nil {
		p.t.Fatal(err)
	}
	return p.write(name+".crt", pem.EncodeToMemory(&pem.Block{Type: "CERTIFICATE", Bytes: der})),
		p.write(name+".key", pem.EncodeToMemory(&pem.Block{Type: "PRIVATE KEY", Bytes: secret}))
}

const (
	secret = "a-token-of-good-length-1"
	wrong  = "a-token-of-good-length-2"
)

// Whoever lacks the token, or does not speak TLS, or does not trust the
// server, or is not known to it, is refused with words that help and hold no
// secret; a flood of what is no protocol is dropped; and the search goes on.
func TestWhoComesIn(t *testing.T) {
	p := paper{t, t.TempDir()}
	cert, key := p.certificate("queue")
	otherCert, otherKey := p.certificate("stranger")
	token, wrongToken := p.write("token", []byte(secret+"\n")), p.write("wrong", []byte(wrong))
	guarded, mutual := Access{TokenFile: token, Cert: cert, Key: key}, Access{TokenFile: token, Cert: cert, Key: key, CA: cert}
	for _, c := range []struct {
		name           string
		server, worker Access
		refused        string // empty: comes in
	}{
		{"all in order", guarded, Access{TokenFile: token, CA: cert}, ""},
		{"wrong token", guarded, Access{TokenFile: wrongToken, CA: cert}, "the token is missing or wrong"},
		{"no token", guarded, Access{CA: cert}, "the token is missing or wrong"},
		{"plain to TLS", guarded, Access{TokenFile: token}, "not the one that is trusted"},
		{"unknown authority", guarded, Access{TokenFile: token, CA: otherCert}, "not the one that is trusted"},
		{"known client", mutual, Access{TokenFile: token, CA: cert, Cert: cert, Key: key}, ""},
		{"unknown client", mutual, Access{TokenFile: token, CA: cert, Cert: otherCert, Key: otherKey}, "tls: "},
		{"token on loopback", Access{TokenFile: token}, Access{TokenFile: token}, ""},
		{"no token on loopback", Access{TokenFile: token}, Access{}, "the token is missing or wrong"},
		{"TLS to plain", Access{TokenFile: token}, Access{TokenFile: token, CA: cert}, "does not speak TLS"},
	} {
		t.Run(c.name, func(t *testing.T) {
			server, err := Serve("127.0.0.1:0", c.server)
			if err != nil {
				t.Fatal(err)
			}
			defer server.Close()
			queue, err := server.Open(Options{})
			if err != nil {
				t.Fatal(err)
			}
			defer queue.Close()
			s, err := queue.Simulator(context.Background(), &fake{name: "made"})
			if err != nil {
				t.Fatal(err)
			}
			garbage(t, strings.TrimPrefix(server.URL(), "nats://"))
			ctx, cancel := context.WithTimeout(context.Background(), 20*time.Second)
			defer cancel()
			work := func(a Access) chan error {
				done := make(chan error, 1)
				w := &Worker{Name: "w", Models: []models.Simulator{&fake{name: "made"}}, Say: func(s string) { t.Log(s) }}
				go func() { done <- w.Run(ctx, server.URL(), a) }()
				return done
			}
			if c.refused != "" {
				err := <-work(c.worker)
				if err == nil || !strings.Contains(err.Error(), c.refused) || strings.Contains(err.Error(), secret) || strings.Contains(err.Error(), wrong) {
					t.Errorf("%v; %q is due", err, c.refused)
				}
				c.worker = c.server
				if c.server.Cert != "" {
					c.worker.CA = cert
				}
			}
			done := work(c.worker)
			if _, err := s.Simulate(ctx, winding(0), axis); err != nil {
				t.Errorf("after that: %v", err)
			}
			cancel()
			if err := <-done; err != nil {
				t.Error(err)
			}
		})
	}
}

// garbage sends a server what is no protocol, on many connections.
func garbage(t *testing.T, address string) {
	t.Helper()
	for i, text := range []string{"GET / HTTP/1.1\r\n\r\n", "\x00\xff\xfe", "PUB x 99999999999\r\n", "CONNECT {\r\n", strings.Repeat("A", 1<<20), "SUB > 1\r\nPUB turnwise.1.hello 2\r\n{}\r\n"} {
		c, err := net.Dial("tcp", address)
		if err != nil {
			t.Fatalf("connection %d: %v", i, err)
		}
		c.SetDeadline(time.Now().Add(200 * time.Millisecond))
		io.Copy(c, strings.NewReader(text))
		io.Copy(io.Discard, c)
		c.Close()
	}
}

// An address that other machines can reach is not opened without a token and
// TLS, and a queue there is not gone to without.
func TestBeyondLoopback(t *testing.T) {
	p := paper{t, t.TempDir()}
	cert, key := p.certificate("queue")
	token := p.write("token", []byte(secret))
	for _, address := range []string{"0.0.0.0:0", "[::]:0", "some.host.example:4222", "192.0.2.1:4222"} {
		for _, a := range []Access{{}, {TokenFile: token}, {Cert: cert, Key: key}} {
			if s, err := Serve(address, a); err == nil || !strings.Contains(err.Error(), "demands a token and TLS") {
				t.Errorf("%s with %+v: %v", address, a, err)
				if s != nil {
					s.Close()
				}
			}
		}
	}
	for _, c := range []struct {
		url     string
		a       Access
		secure  bool
		refused string
	}{
		{"nats://127.0.0.1:4222", Access{}, false, ""},
		{"nats://localhost:4222", Access{}, false, ""},
		{"nats://[::1]:4222", Access{TokenFile: token}, false, ""},
		{"tls://127.0.0.1:4222", Access{}, true, ""},
		{"nats://127.0.0.1:4222", Access{CA: cert}, true, ""},
		{"nats://192.0.2.1:4222", Access{TokenFile: token}, true, ""},
		{"nats://192.0.2.1:4222", Access{}, false, "needs a token"},
		{"nats://localhost.example:4222", Access{}, false, "needs a token"},
		{"nats://" + secret + "@127.0.0.1:4222", Access{}, false, "holds no secrets"},
		{"http://127.0.0.1:4222", Access{}, false, "no queue's address"},
		{"nats://127.0.0.1", Access{}, false, "no queue's address"},
		{"127.0.0.1:4222", Access{}, false, "no queue's address"},
		{"nats://127.0.0.1:4222,nats://192.0.2.1:4222", Access{}, false, "no queue's address"},
	} {
		secure, err := readURL(c.url, c.a)
		switch {
		case c.refused == "" && (err != nil || secure != c.secure):
			t.Errorf("%s: %v, TLS %v", c.url, err, secure)
		case c.refused != "" && (err == nil || !strings.Contains(err.Error(), c.refused) || strings.Contains(err.Error(), secret)):
			t.Errorf("%s: %v; %q is due", c.url, err, c.refused)
		}
	}
}

// A server that keeps no streams is no queue.
func TestServerWithoutStreams(t *testing.T) {
	s, err := server.NewServer(&server.Options{Host: "127.0.0.1", Port: server.RANDOM_PORT, NoLog: true, NoSigs: true})
	if err != nil {
		t.Fatal(err)
	}
	s.Start()
	defer s.Shutdown()
	if !s.ReadyForConnections(10 * time.Second) {
		t.Fatal("the server does not come up")
	}
	if q, err := Open(context.Background(), "nats://"+s.Addr().String(), Access{}, Options{}); err == nil || !strings.Contains(err.Error(), "keeps no streams") {
		t.Errorf("%v, %v", q, err)
	}
}

// Files that hold no token or no certificate, and addresses that are none,
// are refused before anything listens.
func TestWrongAccess(t *testing.T) {
	p := paper{t, t.TempDir()}
	cert, key := p.certificate("queue")
	for i, a := range []Access{
		{TokenFile: p.write("short", []byte("short"))},
		{TokenFile: p.write("two", []byte(secret+"\n"+wrong))},
		{TokenFile: p.write("none", nil)},
		{TokenFile: filepath.Join(p.dir, "absent")},
		{Cert: cert},
		{Key: key},
		{Cert: key, Key: cert},
		{CA: cert},
		{Cert: cert, Key: key, CA: key},
	} {
		if s, err := Serve("127.0.0.1:0", a); err == nil {
			s.Close()
			t.Errorf("access %d is taken", i)
		}
	}
	for _, address := range []string{"", "127.0.0.1", "4222", "127.0.0.1:x", "127.0.0.1:70000", "1:2:3"} {
		if s, err := Serve(address, Access{}); err == nil {
			s.Close()
			t.Errorf("%q is taken", address)
		}
	}
	taken, err := Serve("127.0.0.1:0", Access{})
	if err != nil {
		t.Fatal(err)
	}
	defer taken.Close()
	if s, err := Serve(strings.TrimPrefix(taken.URL(), "nats://"), Access{}); err == nil {
		s.Close()
		t.Error("an address is taken twice")
	}
}

// FuzzMessages demands that no message brings a side down.
func FuzzMessages(f *testing.F) {
	text, err := pack("made", winding(0), axis)
	if err != nil {
		f.Fatal(err)
	}
	f.Add(text)
	f.Add(newAnswer("made", "w", plain(axis), nil).bytes())
	f.Add(newAnswer("made", "w", plain(axis), fmt.Errorf("too short")).bytes())
	f.Add([]byte(`{"id":"1","name":"w","slots":1,"models":["made"]}`))
	f.Fuzz(func(t *testing.T, text []byte) {
		if q, err := unpack(text, digest(text)); err == nil {
			again, err := pack(q.Identity, q.Design, models.Question{Hz: q.Hz, Outputs: q.Outputs, Cone: q.Cone})
			if err == nil {
				if _, err := unpack(again, digest(again)); err != nil {
					t.Errorf("a question is unreadable once read: %v\n%s", err, again)
				}
			}
		}
		if a, err := readAnswer(text, "made", axis); err == nil && !bytes.Contains(text, []byte("made")) {
			t.Errorf("an answer of another model is taken: %+v", a)
		}
		readHello(text)
	})
}
