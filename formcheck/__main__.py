from formcheck.cli import run

run()
