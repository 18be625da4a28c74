"""The schema agrees with itself: everything else is derived from it."""

import pytest

from strutbook_addin.tables.schema import BY_SHEET, TABLES, Kind, Role, normal
from strutbook_addin.tables.units import unit_of


@pytest.mark.parametrize("table", TABLES, ids=lambda table: table.sheet)
def test_columns_of_a_table_are_told_apart_by_their_normal_names(table):
    assert len({normal(column.name) for column in table.columns}) == len(table.columns)


@pytest.mark.parametrize("table", TABLES, ids=lambda table: table.sheet)
def test_every_column_says_what_it_means_in_a_sentence(table):
    for column in table.columns:
        assert column.meaning.endswith((".", ")"))
        assert len(column.meaning) > 10


def test_suggested_units_are_units():
    for table in TABLES:
        for column in table.columns:
            if column.dimension:
                for text in column.dimension.suggested:
                    assert unit_of(text, column.dimension).factor > 0


def test_references_lead_to_tables_that_name_their_rows():
    for table in TABLES:
        for column in table.columns:
            if column.refers_to:
                assert BY_SHEET[column.refers_to].columns[0].kind is Kind.NAME


def test_choices_and_required_columns_are_inputs():
    for table in TABLES:
        for column in table.columns:
            if column.choices or column.required:
                assert column.role is Role.INPUT
