// Command mutate changes one operator, comparison or constant of a package at a
// time and sees whether the package's own tests notice. Use:
//
//	go run ./testdata/mutate -sample 60 ./internal/thermo ./internal/steps ./internal/costs
//
// The files stay as they are: the compiler reads each change from an overlay. It
// prints what survives and the share that was noticed.
package main

import (
	"bytes"
	"encoding/json"
	"flag"
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"sort"
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
}

func main() {
	sample := flag.Int("sample", 0, "try so many changes of each package, drawn with the seed; 0: all")
	seed := flag.Uint64("seed", 1, "of the sample")
	limit := flag.Duration("limit", 3*time.Minute, "for the tests of one change; longer counts as noticed")
	flag.Parse()
	if flag.NArg() == 0 {
		fmt.Fprintln(os.Stderr, "name the packages, such as ./internal/thermo")
		os.Exit(2)
	}
	for _, folder := range flag.Args() {
		if err := mutate(folder, *sample, *seed, *limit); err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
	}
}

func mutate(folder string, sample int, seed uint64, limit time.Duration) error {
	changes, err := changesOf(folder)
	if err != nil {
		return err
	}
	found := len(changes)
	if sample > 0 && sample < len(changes) {
		r := rand.New(rand.NewPCG(seed, 0))
		r.Shuffle(len(changes), func(i, j int) { changes[i], changes[j] = changes[j], changes[i] })
		changes = changes[:sample]
	}
	sort.Slice(changes, func(i, j int) bool { return changes[i].where < changes[j].where })
	noticed, tried := 0, 0
	for _, c := range changes {
		compiles, failed, err := try(folder, c, limit)
		switch {
		case err != nil:
			return err
		case !compiles:
			continue
		case failed:
			noticed++
		default:
			fmt.Println("survives", c.where)
		}
		tried++
	}
	fmt.Printf("%s: %d of %d changes noticed, %.0f %% (%d places in all)\n", folder, noticed, tried, 100*float64(noticed)/float64(max(tried, 1)), found)
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
			all = append(all, change{name, p.Offset, p.Offset + len(was), with, fmt.Sprintf("%s:%d:%d: %s became %s", name, p.Line, p.Column, was, with)})
		}
		ast.Inspect(parsed, func(n ast.Node) bool { return visit(n, add) })
	}
	return all, nil
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

// try runs the tests of the folder with one change.
func try(folder string, c change, limit time.Duration) (compiles, failed bool, err error) {
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
	if exec.Command("go", "test", "-vet=off", "-overlay", overlay, "-c", "-o", binary, folder).Run() != nil {
		return false, false, nil
	}
	tests := exec.Command(binary, "-test.failfast", "-test.timeout", limit.String(), "-rapid.nofailfile")
	tests.Dir = folder
	return true, tests.Run() != nil, nil
}
