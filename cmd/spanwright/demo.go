package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"time"

	"spanwright/api/auth"
	"spanwright/api/localpg"
	"spanwright/api/service"
	"spanwright/api/store"
	"spanwright/estimate/ratebook"
	"spanwright/testdata"
)

const (
	demoDatabase     = "spanwright"
	demoOrganisation = "Brackwater salt works (invented)"
	xlsxType         = "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
)

func demoCommand() command {
	c := command{name: "demo", args: "[flags]", short: "the service on a PostgreSQL of its own, with the Brackwater job"}
	c.long = `
Starts a PostgreSQL in a folder of its own, migrates, loads the invented
Brackwater job once, and serves on the loopback address until Ctrl-C. The data
stays for the next time. It never touches another PostgreSQL on the machine.`
	c.run = func(ctx context.Context, p *program, args []string) error {
		f := p.flags(c)
		dir := f.String("data", p.env("SPANWRIGHT_DATA", demoFolder(p)), "`FOLDER` of the database ($SPANWRIGHT_DATA)")
		port := f.String("port", p.env("SPANWRIGHT_PORT", "8080"), "`PORT` on 127.0.0.1; 0 takes a free one ($SPANWRIGHT_PORT)")
		level := f.String("log-level", p.env("SPANWRIGHT_LOG_LEVEL", "warn"), "debug, info, warn or error ($SPANWRIGHT_LOG_LEVEL)")
		if rest, err := parse(f, args); err != nil {
			return err
		} else if len(rest) > 0 {
			f.Usage()
			return errUsage
		}
		return p.demo(ctx, *dir, "127.0.0.1:"+*port, *level)
	}
	return c
}

// demoFolder is where the demo keeps its data: not below /root, which the
// server's account could not reach.
func demoFolder(p *program) string {
	if os.Geteuid() == 0 {
		return "/var/lib/spanwright-demo"
	}
	if d := p.getenv("XDG_DATA_HOME"); d != "" {
		return filepath.Join(d, "spanwright-demo")
	}
	home, err := os.UserHomeDir()
	if err != nil {
		return filepath.Join(os.TempDir(), "spanwright-demo")
	}
	return filepath.Join(home, ".local", "share", "spanwright-demo")
}

func (p *program) demo(ctx context.Context, dir, listen, level string) error {
	log, err := p.logger("text", level)
	if err != nil {
		return err
	}
	pg, err := localpg.Start(ctx, localpg.Config{Dir: dir, Logger: log})
	if err != nil {
		return err
	}
	defer func() {
		late, cancel := context.WithTimeout(context.WithoutCancel(ctx), 30*time.Second)
		defer cancel()
		if err := pg.Stop(late); err != nil {
			log.Error("stopping the local PostgreSQL", "error", err)
		}
	}()
	token, err := prepareDemo(ctx, pg, dir)
	if err != nil {
		return err
	}
	st, err := store.Open(ctx, pg.URL("spanwright_service", demoDatabase), store.Options{})
	if err != nil {
		return err
	}
	defer st.Close()
	return serve(ctx, serving{store: st, listen: listen, limits: service.DefaultLimits(), log: log, ready: func(address string, s *service.Service) error {
		if err := loadDemo(ctx, s, token); err != nil {
			return err
		}
		p.welcome(address, token)
		return nil
	}})
}

// prepareDemo migrates and returns the demo's token, which is made once and kept
// in a file that only the owner of the folder can read.
func prepareDemo(ctx context.Context, pg *localpg.Server, dir string) (string, error) {
	if err := pg.CreateDatabase(ctx, demoDatabase); err != nil {
		return "", err
	}
	if err := store.Migrate(ctx, pg.AdminURL(demoDatabase)); err != nil {
		return "", err
	}
	file := filepath.Join(dir, "demo-token")
	kept, err := os.ReadFile(file)
	if err == nil {
		return strings.TrimSpace(string(kept)), nil
	}
	if !errors.Is(err, fs.ErrNotExist) {
		return "", err
	}
	a, err := store.OpenAdmin(ctx, pg.AdminURL(demoDatabase))
	if err != nil {
		return "", err
	}
	defer a.Close()
	org, err := a.EnsureOrganisation(ctx, demoOrganisation)
	if err != nil {
		return "", err
	}
	token, err := a.CreateToken(ctx, org, auth.Administrator, "demo", nil)
	if err != nil {
		return "", err
	}
	// Written aside and renamed, so that a kill in between leaves no empty file.
	if err := os.WriteFile(file+".new", []byte(token+"\n"), 0o600); err != nil {
		return "", err
	}
	return token, os.Rename(file+".new", file)
}

// loadDemo posts the demo's workbooks as a user would. Idempotency keys make a
// second start load nothing.
func loadDemo(ctx context.Context, s *service.Service, token string) error {
	a, err := s.Authenticate(ctx, token, "demo")
	if err != nil {
		return fmt.Errorf("the kept demo token is not valid any more; remove the demo's folder to start afresh: %w", err)
	}
	for _, w := range []struct {
		name string
		data []byte
	}{{"brackwater.xlsx", testdata.InnerSupport}, {"brackwater-end-tower.xlsx", testdata.EndTower}} {
		posting := service.Posting{Name: w.name, ContentType: xlsxType, Data: w.data}
		key := service.Idempotency{Key: "demo " + posting.SHA256(), Fingerprint: []byte(posting.SHA256())[:32]}
		if _, err := s.Intake(ctx, a, service.Intake{Posting: posting, BookName: ratebook.KindUnitRate}, key); err != nil {
			return fmt.Errorf("loading %s: %w", w.name, err)
		}
	}
	return nil
}

func (p *program) welcome(address, token string) {
	fmt.Fprintf(p.stdout, `
Spanwright is ready, with the invented Brackwater job. Ctrl-C stops it.

  pages   http://%[1]s/          sign in with the token
  API     http://%[1]s/docs/
  token   %[2]s

Post a schedule and read the range:

  curl -sS -H 'Authorization: Bearer %[2]s' \
    -F file=@testdata/brackwater.xlsx -F project='My first quay' -F rate_book=unit-rate \
    http://%[1]s/v1/intake

`, address, token)
}
