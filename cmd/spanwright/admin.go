package main

import (
	"context"
	"fmt"
	"time"

	"spanwright/api/auth"
	"spanwright/api/store"
)

func migrateCommand() command {
	c := command{name: "migrate", args: "[flags]", short: "bring a database to the schema of this program"}
	c.long = `
Connects as an administrator, makes the roles spanwright_owner, spanwright_service
and spanwright_reader where they are missing, and applies the migrations that the
database lacks. Running it again does nothing.

  SPANWRIGHT_ADMIN_URL='postgres://postgres:…@db/spanwright' spanwright migrate`
	c.run = func(ctx context.Context, p *program, args []string) error {
		f := p.flags(c)
		url := f.String("admin-url", "", "`URL` of the database as an administrator ($SPANWRIGHT_ADMIN_URL)")
		rest, err := parse(f, args)
		if err != nil {
			return err
		}
		if *url = p.orEnv(*url, "SPANWRIGHT_ADMIN_URL"); len(rest) > 0 || *url == "" {
			f.Usage()
			return errUsage
		}
		if err := store.Migrate(ctx, *url); err != nil {
			return err
		}
		fmt.Fprintln(p.stdout, "the schema is up to date")
		return nil
	}
	return c
}

func tokenCommand() command {
	c := command{name: "token", args: "[flags]", short: "make an access token, and the organisation that it is for"}
	c.long = `
Makes a token for an organisation, which is made where it is missing, and prints
it. It is shown this once; only its hash is stored.

  spanwright token --organisation "Brackwater salt works" --role estimator --name "quay job"`
	c.run = func(ctx context.Context, p *program, args []string) error {
		f := p.flags(c)
		url := f.String("admin-url", "", "`URL` of the database as an administrator ($SPANWRIGHT_ADMIN_URL)")
		organisation := f.String("organisation", "", "`NAME` of the organisation")
		role := f.String("role", "administrator", "viewer, estimator, manager or administrator")
		name := f.String("name", "command line", "`NAME` of the token, shown in audit events")
		days := f.Int("days", 0, "days until it expires; 0 is never")
		rest, err := parse(f, args)
		if err != nil {
			return err
		}
		if *url = p.orEnv(*url, "SPANWRIGHT_ADMIN_URL"); len(rest) > 0 || *url == "" || *organisation == "" || *days < 0 {
			f.Usage()
			return errUsage
		}
		r, err := auth.ParseRole(*role)
		if err != nil {
			return err
		}
		a, err := store.OpenAdmin(ctx, *url)
		if err != nil {
			return err
		}
		defer a.Close()
		org, err := a.EnsureOrganisation(ctx, *organisation)
		if err != nil {
			return err
		}
		var expires *time.Time
		if *days > 0 {
			t := time.Now().AddDate(0, 0, *days)
			expires = &t
		}
		text, err := a.CreateToken(ctx, org, r, *name, expires)
		if err != nil {
			return err
		}
		fmt.Fprintln(p.stdout, text)
		return nil
	}
	return c
}
