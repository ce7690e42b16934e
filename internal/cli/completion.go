package cli

import (
	"maps"
	"slices"
	"strings"
	"text/template"

	"github.com/urfave/cli/v2"
)

func (p *program) completion() *cli.Command {
	return command(cli.Command{
		Name:      "completion",
		Usage:     "print what a shell needs to complete commands and flags",
		UsageText: "parch completion bash|zsh|fish",
		Description: "For bash put it into a file under /etc/bash_completion.d or source it from ~/.bashrc; for zsh source\n" +
			"it from ~/.zshrc; for fish save it as ~/.config/fish/completions/parch.fish.",
		Action: p.runCompletion,
	})
}

// bashCompletion offers the commands, then the flags of the command typed, then
// files. In zsh it runs through its own compatibility layer.
var bashCompletion = template.Must(template.New("bash").Parse(`_parch() {
    local word=${COMP_WORDS[COMP_CWORD]} words=
    if [ "$COMP_CWORD" -eq 1 ]; then
        words="{{.First}}"
    else
        case ${COMP_WORDS[1]} in
{{- range .Commands}}
        {{.Name}}) words="{{.Words}}" ;;
{{- end}}
        esac
    fi
    COMPREPLY=($(compgen -W "$words" -- "$word"))
    [ -n "${COMPREPLY[*]}" ] || COMPREPLY=($(compgen -f -- "$word"))
}
complete -o filenames -F _parch parch
`))

// completions is what the template is filled with.
type completions struct {
	First    string
	Commands []commandWords
}

type commandWords struct{ Name, Words string }

func completionsOf(app *cli.App) completions {
	var c completions
	first := []string{"--help", "--version"}
	for _, cmd := range app.Commands {
		first = append(first, cmd.Name)
		words := []string{"--help"}
		for _, f := range cmd.Flags {
			words = append(words, "--"+f.Names()[0])
		}
		c.Commands = append(c.Commands, commandWords{cmd.Name, strings.Join(words, " ")})
	}
	c.First = strings.Join(first, " ")
	return c
}

func (p *program) runCompletion(c *cli.Context) error {
	shell, err := oneArgument(c, "a shell: bash, zsh or fish")
	if err != nil {
		return err
	}
	app := p.app()
	shells := map[string]func() error{
		"bash": func() error { return bashCompletion.Execute(p.stdout, completionsOf(app)) },
		"zsh": func() error {
			if _, err := p.stdout.Write([]byte("autoload -U +X bashcompinit && bashcompinit\n")); err != nil {
				return err
			}
			return bashCompletion.Execute(p.stdout, completionsOf(app))
		},
		"fish": func() error {
			text, err := app.ToFishCompletion()
			if err != nil {
				return err
			}
			_, err = p.stdout.Write([]byte(text))
			return err
		},
	}
	write, ok := shells[shell]
	if !ok {
		known := slices.Sorted(maps.Keys(shells))
		return misused("no completion for "+shell+"; there is one for "+strings.Join(known, ", "), "")
	}
	return failed(write())
}
