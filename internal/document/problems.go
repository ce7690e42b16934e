// Package document reads a file that people edit by hand: one YAML document
// becomes a tree whose nodes know their line and path. Reading a node in the
// wrong way records a problem instead of stopping, so that a file's problems are
// reported all at once.
package document

import (
	"fmt"
	"sort"
	"strings"
)

// shown is how many problems are printed; the rest are counted.
const shown = 50

// Problems collects what is wrong with one file.
type Problems struct {
	file string
	list []problem
}

type problem struct {
	line int
	text string
}

// Add records a problem on a line; line 0 is the file as a whole.
func (p *Problems) Add(line int, format string, args ...any) {
	p.list = append(p.list, problem{line, fmt.Sprintf(format, args...)})
}

// Count is the number of problems so far.
func (p *Problems) Count() int { return len(p.list) }

// Err returns all problems as one error, sorted by line, or nil.
func (p *Problems) Err() error {
	if len(p.list) == 0 {
		return nil
	}
	sort.SliceStable(p.list, func(i, j int) bool { return p.list[i].line < p.list[j].line })
	lines := make([]string, 0, min(len(p.list), shown+1))
	for i, q := range p.list {
		if i == shown {
			lines = append(lines, fmt.Sprintf("%s: %d more problems are not shown", p.file, len(p.list)-shown))
			break
		}
		lines = append(lines, p.where(q.line)+": "+q.text)
	}
	return &Invalid{lines: lines, count: len(p.list)}
}

func (p *Problems) where(line int) string {
	if line <= 0 {
		return p.file
	}
	return fmt.Sprintf("%s:%d", p.file, line)
}

// Invalid is the error of a file that cannot be used: one line a problem.
type Invalid struct {
	lines []string
	count int
}

func (e *Invalid) Error() string { return strings.Join(e.lines, "\n") }

// Lines returns the messages one by one, in the order of the file.
func (e *Invalid) Lines() []string { return e.lines }

// Count is the number of problems, those not printed included.
func (e *Invalid) Count() int { return e.count }
