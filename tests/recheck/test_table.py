"""Reading somebody else's table: what is taken, and errors that name line and column."""

from __future__ import annotations

import pytest

from certify.errors import InputError
from certify.recheck.table import Table, read_sheet, read_table
from tests.recheck.conftest import Write


def read(write: Write, text: str | bytes, *parameters: str, column: str = "claimed") -> Table:
    return read_table(read_sheet(write("t.csv", text)), parameters or ("n",), column)


@pytest.mark.parametrize(
    "text",
    [
        "n,claimed\n2,exists\n3,impossible\n",
        "n,claimed\n2,yes\n3,no",
        "claimed,n\r\nTRUE,2\r\nFALSE,3\r\n",
        "\ufeffn,claimed\n2,1\n3,0\n",
        '"n","claimed"\n"2","Yes"\n"3","No"\n',
        " n , claimed \n\n 2 , exists \n,\n 3 , impossible \n\n",
        "n,claimed,\n2,yes,\n3,no,\n",
        "n,claimed\r2,yes\r3,no\r",
    ],
)
def test_tables_as_they_come(text: str, write: Write) -> None:
    found = read(write, text)
    assert [(row.key, row.exists) for row in found.rows] == [({"n": 2}, True), ({"n": 3}, False)]
    assert found.notes == ()


def test_lines_are_those_of_the_file(write: Write) -> None:
    found = read(write, 'note,n,claimed\n"two\nlines",2,yes\n\nx,3,no\n')
    assert [row.line for row in found.rows] == [2, 5]
    assert found.notes[0].endswith('not used: "note"')


def test_several_parameters_and_another_column(write: Write) -> None:
    found = read(write, "m,n,tour\n-3,4,no\n", "m", "n", column="tour")
    assert found.rows[0].key == {"m": -3, "n": 4}
    assert found.rows[0].name == "m=-3,n=4"


def test_a_row_that_stands_there_twice_is_told(write: Write) -> None:
    found = read(write, "n,claimed\n2,yes\n2,yes\n")
    assert len(found.rows) == 1
    assert found.notes[0].endswith("t.csv:3: n=2 stands on line 2 already")


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("", "t.csv: the file is empty"),
        ("\n , \n", "t.csv: the file is empty"),
        ("n,claimed\n", "t.csv: the table has a header and no rows"),
        ("n;claimed\n2;yes\n", "t.csv:1: there is one column; separate the columns by commas"),
        ("n,claim\n2,yes\n", 't.csv: there is no column "claimed"'),
        ("n,claim\n2,yes\n", 'did you mean "claim"?'),
        ("m,claimed\n2,yes\n", 't.csv: there is no column "n"'),
        ("n,n,claimed\n2,2,yes\n", 't.csv:1: two columns are named "n"'),
        ("n,,claimed\n2,,yes\n", "t.csv:1: column 2 has no name"),
        ("n,claimed\n2\n", "t.csv:2: 1 cells, and there are 2 columns"),
        ("n,claimed\n2,yes,no\n", "t.csv:2: 3 cells"),
        ("n,claimed\n,yes\n", 't.csv:2: column "n": the cell is empty'),
        ("n,claimed\n2,yes\n3,\n", 't.csv:3: column "claimed": the cell is empty'),
        ("n,claimed\ntwo,yes\n", 't.csv:2: column "n": "two" is not an integer'),
        ("n,claimed\n2.0,yes\n", '"2.0" is not an integer'),
        ("n,claimed\n+2,yes\n", '"+2" is not'),
        ("n,claimed\n02,yes\n", '"02" is not'),
        ("n,claimed\n-0,yes\n", '"-0" is not'),
        ("n,claimed\n٢,yes\n", "is not an integer written plainly"),
        ("n,claimed\n9007199254740993,yes\n", "is not an integer written plainly"),
        (f"n,claimed\n{'9' * 5000},yes\n", "is not an integer written plainly"),
        ("n,claimed\n2,maybe\n", '"maybe" is none of exists/impossible, yes/no, true/false, 1/0'),
        ("n,claimed\n2,35\n", '"35" is none of'),
        ("n,claimed\n2,yes\n3,0\n", 't.csv:3: column "claimed": "0" after yes/no'),
        (
            "n,claimed\n2,yes\n3,no\n2,no\n",
            "t.csv:4: n=2 is impossible here, and exists on line 2; keep one of them",
        ),
        ('n,claimed\n2,"yes\n', "t.csv:2: not CSV"),
        ('n,claimed\n2,"y"es\n', "t.csv:2: not CSV"),
        (b"n,claimed\n2,yes\n3,\xff\n", "t.csv:3: this line is not UTF-8"),
        ("n,claimed\n2,yes\n".encode("utf-16"), "is not UTF-8"),
        (f"n,claimed\n2,{'x' * 200_000}\n", "t.csv:2: not CSV: field larger than field limit"),
        ("n,claimed\n2\0,yes\n", "is not an integer"),
    ],
)
def test_what_is_wrong_is_said_with_its_place(text: str | bytes, said: str, write: Write) -> None:
    with pytest.raises(InputError) as caught:
        read(write, text)
    assert said in str(caught.value)


def test_a_file_that_cannot_be_read(write: Write) -> None:
    path = write("t.csv", "").parent
    with pytest.raises(InputError, match="cannot be read"):
        read_sheet(path)
