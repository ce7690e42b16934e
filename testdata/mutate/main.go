// Command mutate changes one operator, comparison or constant of a package at a
// time and sees whether the package's own tests notice. Use:
//
//	go run ./testdata/mutate -sample 60 ./internal/thermo ./internal/steps ./internal/costs
//
// The files stay as they are: the compiler reads each change from an overlay. A
// change that no test comes past survives without being run. What survives the
// package's own tests is tried on those of the packages under -also. It prints
// what survives and the share that was noticed. -from and -to run a part of the
// sample, so that a long one can be done in pieces that add up to it.
package main

import (
	"bytes"
	"encoding/json"
	"flag"
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"time"
)

// change replaces the bytes from At to End of a file.
type change struct {
	file    string
	at, end int
	with    string
	where   string // file:line: what became what

	line, column int
	inFunction   bool
}

func main() {
	var r runs
	sample := flag.Int("sample", 0, "try so many changes of each package, drawn with the seed; 0: all")
	seed := flag.Uint64("seed", 1, "of the sample")
	from := flag.Int("from", 0, "first change of the sample to try")
	to := flag.Int("to", math.MaxInt, "first change of the sample not to try any more")
	also := flag.String("also", "", "packages, by commas, whose tests see what survives, such as ./internal/proof")
	flag.DurationVar(&r.limit, "limit", time.Minute, "for the tests of one change; longer counts as noticed")
	flag.StringVar(&r.skip, "skip", "^$", "tests that are left out, such as those that start another program")
	flag.Parse()
	if flag.NArg() == 0 {
		fmt.Fprintln(os.Stderr, "name the packages, such as ./internal/thermo")
		os.Exit(2)
	}
	if *also != "" {
		r.also = strings.Split(*also, ",")
	}
	for _, folder := range flag.Args() {
		changes, err := changesOf(folder)
		if err == nil {
			fmt.Printf("%s: %d places in all\n", folder, len(changes))
			err = r.mutate(folder, part(changes, *sample, *seed, *from, *to))
		}
		if err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
	}
}

// part is what is to be tried of a sample of all changes.
func part(changes []change, sample int, seed uint64, from, to int) []change {
	if sample > 0 && sample < len(changes) {
		r := rand.New(rand.NewPCG(seed, 0))
		r.Shuffle(len(changes), func(i, j int) { changes[i], changes[j] = changes[j], changes[i] })
		changes = changes[:sample]
	}
	to = min(to, len(changes))
	return changes[min(from, to):to]
}

// runs says how tests are run.
type runs struct {
	limit time.Duration
	skip  string
	also  []string
}

func (r runs) mutate(folder string, changes []change) error {
	passed, err := r.coverage(folder)
	if err != nil {
		return err
	}
	noticed, tried := 0, 0
	for _, c := range changes {
		seen := false
		for _, tests := range append([]string{folder}, r.also...) {
			if tests == folder && !passed.holds(c) {
				continue
			}
			compiles, failed, err := r.try(tests, c)
			if err != nil {
				return err
			}
			if !compiles {
				seen, tried, noticed = true, tried-1, noticed-1
			}
			if seen = seen || failed; seen {
				break
			}
		}
		tried++
		if seen {
			noticed++
			continue
		}
		where := c.where
		if !passed.holds(c) {
			where += " (no test of the package comes here)"
		}
		fmt.Println("survives", where)
	}
	fmt.Printf("%s: %d of %d changes noticed, %.0f %%\n", folder, noticed, tried, 100*float64(noticed)/float64(max(tried, 1)))
	return nil
}

// swaps are the operators that take each other's place.
var swaps = map[token.Token]string{
	token.ADD: "-", token.SUB: "+", token.MUL: "/", token.QUO: "*",
	token.LSS: ">=", token.GEQ: "<", token.GTR: "<=", token.LEQ: ">", token.EQL: "!=", token.NEQ: "==",
	token.LAND: "||", token.LOR: "&&", token.ADD_ASSIGN: "-=", token.SUB_ASSIGN: "+=", token.MUL_ASSIGN: "/=", token.QUO_ASSIGN: "*=",
}

func changesOf(folder string) (all []change, err error) {
	names, err := filepath.Glob(filepath.Join(folder, "*.go"))
	if err != nil {
		return nil, err
	}
	for _, name := range names {
		if strings.HasSuffix(name, "_test.go") {
			continue
		}
		files := token.NewFileSet()
		parsed, err := parser.ParseFile(files, name, nil, 0)
		if err != nil {
			return nil, err
		}
		add := func(at token.Pos, was, with string) {
			p := files.Position(at)
			where := fmt.Sprintf("%s:%d:%d: %s became %s", name, p.Line, p.Column, was, with)
			all = append(all, change{name, p.Offset, p.Offset + len(was), with, where, p.Line, p.Column, inFunction(parsed, at)})
		}
		ast.Inspect(parsed, func(n ast.Node) bool { return visit(n, add) })
	}
	return all, nil
}

func inFunction(file *ast.File, at token.Pos) bool {
	return slices.ContainsFunc(file.Decls, func(d ast.Decl) bool {
		f, ok := d.(*ast.FuncDecl)
		return ok && f.Pos() <= at && at < f.End()
	})
}

// visit proposes the changes of one node; it leaves out text and messages of errors.
func visit(n ast.Node, add func(at token.Pos, was, with string)) bool {
	switch n := n.(type) {
	case *ast.GenDecl:
		return n.Tok != token.IMPORT
	case *ast.BinaryExpr:
		if with, ok := swaps[n.Op]; ok && !isText(n.X) && !isText(n.Y) {
			add(n.OpPos, n.Op.String(), with)
		}
	case *ast.AssignStmt:
		if with, ok := swaps[n.Tok]; ok && !isText(n.Rhs[0]) {
			add(n.TokPos, n.Tok.String(), with)
		}
	case *ast.BasicLit:
		if n.Kind != token.FLOAT {
			return true // an integer is an index more often than not
		}
		if v, err := strconv.ParseFloat(n.Value, 64); err == nil && v != 0 {
			add(n.Pos(), n.Value, strconv.FormatFloat(1.25*v, 'g', -1, 64))
		}
	case *ast.CallExpr:
		if s, ok := n.Fun.(*ast.SelectorExpr); ok && strings.HasSuffix(s.Sel.Name, "rintf") || ok && s.Sel.Name == "Errorf" {
			return false
		}
	}
	return true
}

func isText(e ast.Expr) bool {
	l, ok := e.(*ast.BasicLit)
	return ok && l.Kind == token.STRING
}

// try runs the tests of a folder with one change.
func (r runs) try(folder string, c change) (compiles, failed bool, err error) {
	text, err := os.ReadFile(c.file)
	if err != nil {
		return false, false, err
	}
	work, err := os.MkdirTemp("", "mutate")
	if err != nil {
		return false, false, err
	}
	defer os.RemoveAll(work)
	changed := bytes.Join([][]byte{text[:c.at], []byte(c.with), text[c.end:]}, nil)
	whole, err := filepath.Abs(c.file)
	if err != nil {
		return false, false, err
	}
	file, overlay, binary := filepath.Join(work, "changed.go"), filepath.Join(work, "overlay.json"), filepath.Join(work, "tests")
	list, err := json.Marshal(map[string]map[string]string{"Replace": {whole: file}})
	if err != nil {
		return false, false, err
	}
	if err := os.WriteFile(file, changed, 0o600); err != nil {
		return false, false, err
	}
	if err := os.WriteFile(overlay, list, 0o600); err != nil {
		return false, false, err
	}
	if exec.Command("go", "test", "-vet=off", "-overlay", overlay, "-ldflags=-s -w", "-c", "-o", binary, folder).Run() != nil {
		return false, false, nil
	}
	flags := []string{"-test.short", "-test.failfast", "-test.skip", r.skip, "-test.timeout", r.limit.String()}
	if drawsCases(folder) {
		flags = append(flags, "-rapid.nofailfile")
	}
	tests := exec.Command(binary, flags...)
	tests.Dir = folder
	return true, tests.Run() != nil, nil
}

// drawsCases tells whether the tests of a folder know the flags of rapid.
func drawsCases(folder string) bool {
	names, _ := filepath.Glob(filepath.Join(folder, "*_test.go"))
	return slices.ContainsFunc(names, func(name string) bool {
		text, err := os.ReadFile(name)
		return err == nil && bytes.Contains(text, []byte(`"pgregory.net/rapid"`))
	})
}

// stretch is a piece of a file that tests came past, from line and column to line
// and column.
type stretch struct{ line, column, toLine, toColumn int }

// passed are the stretches by the file's base name: those that tests came past, and
// those that none did.
type passed map[string]struct{ by, never []stretch }

// coverage runs the tests of a folder as they are; they have to pass.
func (r runs) coverage(folder string) (passed, error) {
	work, err := os.MkdirTemp("", "mutate")
	if err != nil {
		return nil, err
	}
	defer os.RemoveAll(work)
	profile := filepath.Join(work, "profile")
	if out, err := exec.Command("go", "test", "-short", "-skip", r.skip, "-coverprofile", profile, folder).CombinedOutput(); err != nil {
		return nil, fmt.Errorf("the tests of %s fail as they are: %w\n%s", folder, err, out)
	}
	text, err := os.ReadFile(profile)
	if err != nil {
		return nil, err
	}
	p := passed{}
	for line := range strings.Lines(string(text)) {
		name, rest, _ := strings.Cut(line, ":")
		var s stretch
		var statements, count int
		if n, _ := fmt.Sscanf(rest, "%d.%d,%d.%d %d %d", &s.line, &s.column, &s.toLine, &s.toColumn, &statements, &count); n == 6 {
			all := p[filepath.Base(name)]
			if count > 0 {
				all.by = append(all.by, s)
			} else {
				all.never = append(all.never, s)
			}
			p[filepath.Base(name)] = all
		}
	}
	return p, nil
}

// holds tells whether tests may come past a change. What stands outside functions,
// or in none of the stretches, such as the condition of a case, counts as passed.
func (p passed) holds(c change) bool {
	all := p[filepath.Base(c.file)]
	return !c.inFunction || slices.ContainsFunc(all.by, c.within) || !slices.ContainsFunc(all.never, c.within)
}

func (c change) within(s stretch) bool {
	after := c.line > s.line || c.line == s.line && c.column >= s.column
	before := c.line < s.toLine || c.line == s.toLine && c.column < s.toColumn
	return after && before
}
