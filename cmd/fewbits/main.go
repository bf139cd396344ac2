// Command fewbits measures what each way of quantizing speech does to given
// recordings, so that bits, law, overload point and table can be settled.
package main

import "os"

func main() { os.Exit(run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) }
