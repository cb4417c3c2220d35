package main

import (
	"context"
	"os"

	"spanwright/estimate/schedule"
)

func templateCommand() command {
	c := command{name: "template", args: "[flags]", short: "write an empty schedule as a workbook to be filled in"}
	c.long = `
Writes the template of a schedule (XLSX): a sheet Schedule with every column, one
example row and drop-down lists; a sheet Job with every setting; a sheet Help that
says what each one means and accepts. Columns that are not needed may be deleted.

  spanwright template --out schedule.xlsx
  spanwright price schedule.xlsx`
	c.run = func(_ context.Context, p *program, args []string) error {
		f := p.flags(c)
		out := f.String("out", "-", "`FILE` to write to; - is standard output")
		if rest, err := parse(f, args); err != nil {
			return err
		} else if len(rest) > 0 {
			f.Usage()
			return errUsage
		}
		data, err := schedule.Template()
		if err != nil {
			return err
		}
		if *out == "-" {
			_, err = p.stdout.Write(data)
			return err
		}
		return os.WriteFile(*out, data, 0o644)
	}
	return c
}
