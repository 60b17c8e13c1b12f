"""The program called with words, as a terminal would."""

import pytest

from advisor.cli.main import main


@pytest.fixture
def run(capsys):
    """Exit code, output and errors of the program called with words."""

    def called(*words):
        with pytest.raises(SystemExit) as left:
            main([str(word) for word in words])
        out, err = capsys.readouterr()
        return left.value.code, out, err

    return called
