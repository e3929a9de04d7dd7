from formcheck.cli import main

main()
