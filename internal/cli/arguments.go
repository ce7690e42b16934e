package cli

import (
	"fmt"
	"regexp"
	"slices"
	"strings"

	"github.com/urfave/cli/v2"

	"parch/internal/document"
)

// flagsFirst moves the flags of a command before its other arguments, so that
// they may stand on either side, and refuses a flag that is given twice where it
// holds one value. A call for help asks for nothing else.
// Everything after "--" is an argument.
func flagsFirst(app *cli.App, args []string) ([]string, error) {
	if len(args) == 0 || strings.HasPrefix(args[0], "-") {
		return args, nil
	}
	cmd := app.Command(args[0])
	if cmd == nil {
		return args, nil
	}
	var flags, rest []string
	seen := map[string]bool{}
	for i := 1; i < len(args); i++ {
		arg := args[i]
		if arg == "--" {
			rest = append(rest, args[i+1:]...)
			break
		}
		if !strings.HasPrefix(arg, "-") || arg == "-" {
			rest = append(rest, arg)
			continue
		}
		flags = append(flags, arg)
		name, _, joined := strings.Cut(strings.TrimLeft(arg, "-"), "=")
		if seen[name] && !repeatable(cmd, name) {
			return nil, misused(fmt.Sprintf("--%s is given twice", name), "")
		}
		seen[name] = true
		if takesValue(cmd, name) && !joined {
			if i++; i == len(args) {
				return nil, misused(fmt.Sprintf("--%s needs a value", name), "")
			}
			flags = append(flags, args[i])
		}
	}
	if seen["help"] || seen["h"] {
		return []string{args[0], "--help"}, nil
	}
	return slices.Concat(args[:1], flags, []string{"--"}, rest), nil
}

// repeatable reports whether a flag may be given several times.
func repeatable(cmd *cli.Command, name string) bool {
	for _, f := range cmd.Flags {
		if _, several := f.(*cli.StringSliceFlag); several && slices.Contains(f.Names(), name) {
			return true
		}
	}
	return false
}

func takesValue(cmd *cli.Command, name string) bool {
	for _, f := range cmd.Flags {
		if slices.Contains(f.Names(), name) {
			_, isSwitch := f.(*cli.BoolFlag)
			return !isSwitch
		}
	}
	return false
}

// The messages of the flag library that say which flag is wrong.
var (
	notDefined = regexp.MustCompile(`^flag provided but not defined: -(.*)$`)
	badSwitch  = regexp.MustCompile(`^invalid boolean value "(.*)" for -([^:]*)`)
	badNumber  = regexp.MustCompile(`^invalid value "(.*)" for flag -([^:]*): (.*)$`)
)

// flagFailure puts an error of the flag library into our words.
func flagFailure(err error, flags []cli.Flag) error {
	text := err.Error()
	if m := notDefined.FindStringSubmatch(text); m != nil {
		known := []string{"help"}
		for _, f := range flags {
			known = append(known, f.Names()...)
		}
		return misused(fmt.Sprintf("unknown flag --%s", m[1]), didYouMean(m[1], known, "--help lists the flags"))
	}
	if m := badSwitch.FindStringSubmatch(text); m != nil {
		return misused(fmt.Sprintf("--%s takes no value, but %q was given", m[2], m[1]), "")
	}
	if m := badNumber.FindStringSubmatch(text); m != nil {
		what := "is not a whole number in digits, as 2000"
		if strings.HasSuffix(m[3], "out of range") {
			what = "is too large"
		}
		return misused(fmt.Sprintf("--%s: %q %s", m[2], m[1], what), "")
	}
	return misused(text, "")
}

// didYouMean offers the nearest known name, or else the given advice. Names that
// stand in flags get their dashes.
func didYouMean(typed string, known []string, otherwise string) string {
	near := document.Nearest(typed, known)
	if len(near) == 0 {
		return otherwise
	}
	if strings.Contains(otherwise, "flags") {
		near[0] = "--" + near[0]
	}
	return fmt.Sprintf("did you mean %s?", near[0])
}

// oneArgument returns the only argument of a command.
func oneArgument(c *cli.Context, what string) (string, error) {
	switch n := c.Args().Len(); {
	case n == 0:
		return "", misused(fmt.Sprintf("%s needs %s", c.Command.Name, what), "parch "+c.Command.UsageText[len("parch "):])
	case n > 1:
		return "", misused(fmt.Sprintf("%s takes one argument, but %d were given: %s", c.Command.Name, n, strings.Join(c.Args().Slice(), " ")),
			"a name with spaces goes between quotes")
	}
	return c.Args().First(), nil
}
