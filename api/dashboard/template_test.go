package dashboard

import (
	"fmt"
	"html/template"
	"reflect"
	"strings"
	"testing"
	"text/template/parse"
)

// TestTemplatesFitTheirPages follows every field of every template, branches that
// no test renders included, through the type of the page.
func TestTemplatesFitTheirPages(t *testing.T) {
	p, err := parsePages()
	if err != nil {
		t.Fatal(err)
	}
	types := map[string]any{"error": errorPage{}, "project": projectPage{}, "projects": projectsPage{}, "sign-in": signInPage{}}
	for _, name := range pageNames {
		page, ok := types[name]
		if !ok {
			t.Fatalf("the page %s has no type here", name)
		}
		c := checker{templates: p[name], seen: map[string]bool{}}
		c.call("frame", reflect.TypeOf(page))
		for _, f := range c.faults {
			t.Errorf("page %s: %s", name, f)
		}
	}
}

// TestCheckerFindsFaults makes sure that the check above can fail.
func TestCheckerFindsFaults(t *testing.T) {
	type row struct{ Name string }
	type page struct{ Rows []row }
	for text, faulty := range map[string]bool{
		`{{range .Rows}}{{.Name}}{{end}}`:                  false,
		`{{range .Rows}}{{.Nmae}}{{end}}`:                  true,
		`{{if .Rows}}{{else}}{{.Name}}{{end}}`:             true,
		`{{with .Rows}}{{.Name}}{{end}}`:                   true,
		`{{range $i, $r := .Rows}}{{$r.Name}}{{end}}`:      false,
		`{{range $i, $r := .Rows}}{{$r.Other}}{{end}}`:     true,
		`{{template "x" .}}{{define "x"}}{{.No}}{{end}}`:   true,
		`{{template "missing" .}}`:                         true,
		`{{len .Row}}`:                                     true,
		`{{range .Rows}}{{range .Name}}{{end}}{{end}}`:     true,
		`{{range .Rows}}{{if eq .Name "a"}}{{end}}{{end}}`: false,
	} {
		c := checker{templates: template.Must(template.New("frame").Parse(text)), seen: map[string]bool{}}
		c.call("frame", reflect.TypeFor[page]())
		if got := len(c.faults) > 0; got != faulty {
			t.Errorf("%s: faults %q, want faults: %v", text, c.faults, faulty)
		}
	}
}

// checker follows types through templates. It knows the part of the language that
// the pages use and takes the rest for a fault.
type checker struct {
	templates *template.Template
	seen      map[string]bool
	faults    []string
}

// scope is the type of the dot and of the variables.
type scope struct {
	dot       reflect.Type
	variables map[string]reflect.Type
}

func (c *checker) fault(format string, args ...any) reflect.Type {
	c.faults = append(c.faults, fmt.Sprintf(format, args...))
	return nil
}

func (c *checker) call(name string, dot reflect.Type) {
	key := fmt.Sprint(name, " ", dot)
	if c.seen[key] {
		return
	}
	c.seen[key] = true
	t := c.templates.Lookup(name)
	if t == nil || t.Tree == nil {
		c.fault("there is no template %q", name)
		return
	}
	c.list(t.Tree.Root, scope{dot, map[string]reflect.Type{"$": dot}})
}

func (c *checker) list(l *parse.ListNode, s scope) {
	if l == nil {
		return
	}
	for _, n := range l.Nodes {
		c.node(n, s)
	}
}

func (c *checker) node(n parse.Node, s scope) {
	switch n := n.(type) {
	case *parse.TextNode, *parse.CommentNode:
	case *parse.ActionNode:
		c.pipe(n.Pipe, s)
	case *parse.IfNode:
		c.pipe(n.Pipe, s)
		c.list(n.List, s)
		c.list(n.ElseList, s)
	case *parse.WithNode:
		c.list(n.List, scope{c.pipe(n.Pipe, s), s.variables})
		c.list(n.ElseList, s)
	case *parse.RangeNode:
		c.list(n.List, c.each(n, s))
		c.list(n.ElseList, s)
	case *parse.TemplateNode:
		var dot reflect.Type
		if n.Pipe != nil {
			dot = c.pipe(n.Pipe, s)
		}
		c.call(n.Name, dot)
	default:
		c.fault("%s is not known to the check", n)
	}
}

// each is the scope inside a range: over a slice only.
func (c *checker) each(n *parse.RangeNode, s scope) scope {
	of := c.pipe(&parse.PipeNode{NodeType: parse.NodePipe, Cmds: n.Pipe.Cmds}, s)
	if of == nil {
		return scope{nil, s.variables}
	}
	if of.Kind() != reflect.Slice {
		return scope{c.fault("%s is a %s, not a list", n.Pipe, of), s.variables}
	}
	inner := scope{of.Elem(), map[string]reflect.Type{}}
	for k, v := range s.variables {
		inner.variables[k] = v
	}
	for i, v := range n.Pipe.Decl {
		inner.variables[v.Ident[0]] = of.Elem()
		if i == 0 && len(n.Pipe.Decl) == 2 {
			inner.variables[v.Ident[0]] = reflect.TypeFor[int]()
		}
	}
	return inner
}

// pipe returns the type of a pipe's value, nil where a fault has been noted.
func (c *checker) pipe(p *parse.PipeNode, s scope) reflect.Type {
	if len(p.Cmds) != 1 || len(p.Decl) > 0 {
		return c.fault("%s: pipes and declarations are not known to the check", p)
	}
	args := p.Cmds[0].Args
	if f, ok := args[0].(*parse.IdentifierNode); ok {
		for _, a := range args[1:] {
			c.value(a, s)
		}
		switch f.Ident {
		case "eq", "not":
			return reflect.TypeFor[bool]()
		case "and", "or":
			return reflect.TypeFor[any]()
		case "len":
			return reflect.TypeFor[int]()
		}
		return c.fault("the function %s is not known to the check", f.Ident)
	}
	if len(args) != 1 {
		return c.fault("%s: calls are not known to the check", p)
	}
	return c.value(args[0], s)
}

func (c *checker) value(n parse.Node, s scope) reflect.Type {
	switch n := n.(type) {
	case *parse.DotNode:
		return s.dot
	case *parse.FieldNode:
		return c.fields(s.dot, n.Ident)
	case *parse.VariableNode:
		return c.fields(s.variables[n.Ident[0]], n.Ident[1:])
	case *parse.PipeNode:
		return c.pipe(n, s)
	case *parse.StringNode:
		return reflect.TypeFor[string]()
	case *parse.NumberNode:
		return reflect.TypeFor[int]()
	}
	return c.fault("%s is not known to the check", n)
}

func (c *checker) fields(t reflect.Type, names []string) reflect.Type {
	for i, name := range names {
		if t != nil && t.Kind() == reflect.Pointer {
			t = t.Elem()
		}
		if t == nil || t.Kind() != reflect.Struct {
			return c.fault("%s of %v, which has no fields", strings.Join(names[i:], "."), t)
		}
		f, ok := t.FieldByName(name)
		if !ok || !f.IsExported() {
			return c.fault("%s has no field %s", t, name)
		}
		t = f.Type
	}
	return t
}
