package remote

import (
	"crypto/tls"
	"crypto/x509"
	"errors"
	"fmt"
	"net"
	"net/url"
	"os"
	"strings"
)

// Access says who may use a queue and how each side knows the other. Secrets
// are only ever named by their files.
type Access struct {
	TokenFile string // one line, the same on every machine
	Cert, Key string // PEM files: of the server, or of a client that the server wants to know
	CA        string // PEM file: whom to trust, in place of the system's authorities
}

// leastToken is the shortest token that keeps anyone out, bytes.
const leastToken = 16

// token reads the token; empty where there is none.
func (a Access) token() (string, error) {
	if a.TokenFile == "" {
		return "", nil
	}
	text, err := os.ReadFile(a.TokenFile)
	if err != nil {
		return "", fmt.Errorf("the token: %w", err)
	}
	token := strings.TrimSpace(string(text))
	if len(token) < leastToken || strings.ContainsAny(token, " \t\r\n") {
		return "", fmt.Errorf("%s holds no token: one line of at least %d characters without spaces is due, such as 'openssl rand -hex 32' writes", a.TokenFile, leastToken)
	}
	return token, nil
}

// certificates reads the certificate and the authorities; nil where none are
// named.
func (a Access) certificates() (own []tls.Certificate, trusted *x509.CertPool, err error) {
	if (a.Cert == "") != (a.Key == "") {
		return nil, nil, errors.New("a certificate and its key go together: give both or none")
	}
	if a.Cert != "" {
		pair, err := tls.LoadX509KeyPair(a.Cert, a.Key)
		if err != nil {
			return nil, nil, fmt.Errorf("the certificate: %w", err)
		}
		own = append(own, pair)
	}
	if a.CA != "" {
		text, err := os.ReadFile(a.CA)
		if err != nil {
			return nil, nil, fmt.Errorf("the authority: %w", err)
		}
		trusted = x509.NewCertPool()
		if !trusted.AppendCertsFromPEM(text) {
			return nil, nil, fmt.Errorf("the authority: %s holds no PEM certificate", a.CA)
		}
	}
	return own, trusted, nil
}

// serverTLS is how a server presents itself; nil: not at all. With an
// authority it asks clients for a certificate too.
func (a Access) serverTLS() (*tls.Config, error) {
	own, trusted, err := a.certificates()
	if err != nil || own == nil {
		if err == nil && trusted != nil {
			err = errors.New("an authority to know clients by needs a certificate of the server's own")
		}
		return nil, err
	}
	c := &tls.Config{MinVersion: tls.VersionTLS12, Certificates: own}
	if trusted != nil {
		c.ClientCAs, c.ClientAuth = trusted, tls.RequireAndVerifyClientCert
	}
	return c, nil
}

// clientTLS is how a client wants to know a server.
func (a Access) clientTLS() (*tls.Config, error) {
	own, trusted, err := a.certificates()
	return &tls.Config{MinVersion: tls.VersionTLS12, Certificates: own, RootCAs: trusted}, err
}

// door is an address to listen at.
type door struct {
	host     string
	port     int
	loopback bool
}

// readDoor reads an address to listen at. Without a host it is loopback.
func readDoor(address string) (door, error) {
	host, port, err := net.SplitHostPort(address)
	if err != nil {
		return door{}, fmt.Errorf("%q is no address; write host and port, such as 127.0.0.1:4222", address)
	}
	n, err := net.LookupPort("tcp", port)
	if err != nil {
		return door{}, fmt.Errorf("%q is no address: %w", address, err)
	}
	if host == "" || host == "localhost" {
		host = "127.0.0.1"
	}
	return door{host, n, isLoopback(host)}, nil
}

func isLoopback(host string) bool {
	ip := net.ParseIP(host)
	return host == "localhost" || ip != nil && ip.IsLoopback()
}

// readURL reads the address of a queue, and whether TLS is a must there.
func readURL(text string, a Access) (secure bool, err error) {
	u, err := url.Parse(text)
	switch {
	case err != nil || u.Scheme != "nats" && u.Scheme != "tls" || u.Hostname() == "" || u.Port() == "":
		return false, errors.New("that is no queue's address; write nats://HOST:PORT, such as nats://127.0.0.1:4222")
	case u.User != nil:
		return false, errors.New("a queue's address holds no secrets; name the token's file with --token-file")
	case !isLoopback(u.Hostname()) && a.TokenFile == "":
		return false, errors.New("a queue on another machine needs a token; name its file with --token-file")
	}
	return u.Scheme == "tls" || a.CA != "" || a.Cert != "" || !isLoopback(u.Hostname()), nil
}
