package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/status"
)

// newCompletion is "isofacet completion SHELL".
func newCompletion(p *program) *cobra.Command {
	return &cobra.Command{
		Use:   "completion bash|zsh|fish|powershell",
		Short: "the script with which a shell completes commands and options",
		Long: `Writes a script for the shell to standard output. Load it in the shell's start
file; for bash:

  source <(isofacet completion bash)`,
		Example:   "isofacet completion bash > isofacet.bash",
		ValidArgs: shells,
		Args:      cobra.ArbitraryArgs,
		RunE: func(cmd *cobra.Command, args []string) error {
			if len(args) == 1 {
				switch args[0] {
				case "bash":
					return cmd.Root().GenBashCompletionV2(p.out, true)
				case "zsh":
					return cmd.Root().GenZshCompletion(p.out)
				case "fish":
					return cmd.Root().GenFishCompletion(p.out, true)
				case "powershell":
					return cmd.Root().GenPowerShellCompletionWithDesc(p.out)
				}
			}
			return status.Usage(fmt.Errorf("completion %q: expected bash, zsh, fish or powershell", strings.Join(args, " ")), "as in isofacet completion bash")
		},
	}
}

var shells = []string{"bash", "zsh", "fish", "powershell"}
