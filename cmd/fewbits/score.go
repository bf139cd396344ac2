package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"fewbits/cmd/fewbits/internal/listening"
)

// scoreCommand counts filled answer sheets of a listening session.
func scoreCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "score KEY.csv ANSWERS.csv...",
		Short: "count the answers of blind listening against the key",
		Long: `Reads the key that ab wrote and one CSV per listener with the columns pair and
preferred (first, second or none), and prints how often each design was
preferred, with the exact two-sided sign test; answers of "none" do not count in
it. A preference for a place rather than a design is told as well.`,
		Example: "  fewbits score listening/key.csv anna.csv bo.csv",
		Args:    atLeast(2),
		RunE: func(c *cobra.Command, args []string) error {
			s, err := listening.Score(args[0], args[1:]...)
			if err != nil {
				return err
			}
			w := c.OutOrStdout()
			fmt.Fprintf(w, "%s preferred %d times, %s %d times, no preference %d times, unanswered %d\n",
				s.A, s.PreferA, s.B, s.PreferB, s.None, s.Unanswered)
			fmt.Fprintf(w, "sign test: p = %.4f that chance alone gives so uneven a split\n", s.P)
			fmt.Fprintf(w, "first place preferred %d times, second %d times (p = %.4f)\n", s.First, s.Second, s.PlaceP)
			return nil
		},
	}
}
