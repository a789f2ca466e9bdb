"""``python -m profiler`` does what the command ``overbrow`` does."""

from profiler.cli.main import run

if __name__ == "__main__":
    run()
