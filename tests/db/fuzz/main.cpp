// SPDX-License-Identifier: GPL-3.0-or-later
// Damaged certificates without end: real files, cut, joined, and sprinkled with what certificates really go wrong by.
//   certificate_fuzz --cases 400 --seed 1          the short form of the test run
//   certificate_fuzz --seconds 600 --seed 7        the long form
// With clang the same target runs under libFuzzer: see DEVELOPERS.md.
#include <xlsxwriter.h>
#include <zip.h>

#include <QFile>
#include <QTemporaryDir>
#include <chrono>
#include <cstdio>
#include <cstdlib>
#include <cstring>
#include <random>
#include <vector>

#include "base/folders.h"
#include "target.h"

namespace {

using Random = std::mt19937;

QByteArray fileBytes(const QString& path) {
    QFile file(path);
    if (!file.open(QIODevice::ReadOnly)) std::exit(3);
    return file.readAll();
}

/// A small workbook with text, numbers, formats and a formula.
QByteArray workbook() {
    const QTemporaryDir folder;
    const QByteArray path = folder.filePath("seed.xlsx").toUtf8();
    lxw_workbook* book = workbook_new(path.constData());
    lxw_worksheet* sheet = workbook_add_worksheet(book, "A");
    lxw_format* format = workbook_add_format(book);
    format_set_num_format(format, "0.000");
    const char* header[] = {"heat", "grade", "C", "Cr", "Ni", "N ppm"};
    for (lxw_col_t i = 0; i < 6; ++i) worksheet_write_string(sheet, 0, i, header[i], nullptr);
    for (lxw_row_t row = 1; row < 6; ++row) {
        worksheet_write_number(sheet, row, 0, 4731 + row, nullptr);
        worksheet_write_string(sheet, row, 1, "1.4307", nullptr);
        worksheet_write_number(sheet, row, 2, 0.02, format);
        worksheet_write_string(sheet, row, 3, "<18,1", nullptr);
        worksheet_write_formula_num(sheet, row, 4, "=4*2", nullptr, 8);
        worksheet_write_number(sheet, row, 5, 640, nullptr);
    }
    workbook_close(book);
    return fileBytes(QString::fromUtf8(path));
}

QByteArray damaged(QByteArray bytes, Random& random) {
    static const char* const tokens[] = {"<",
                                         "0,0",
                                         "1e309",
                                         "-",
                                         "\"",
                                         ";",
                                         ",",
                                         "\n",
                                         "\t",
                                         "Rest",
                                         "ppm",
                                         "nnw.",
                                         "\0",
                                         "C",
                                         "%",
                                         "\xFF",
                                         "\xC3",
                                         "999999999999999999999",
                                         "<c r=\"ZZZZ9\">",
                                         "</row>",
                                         "&#0;",
                                         "<t>",
                                         "x0,001 %",
                                         "heat",
                                         "O",
                                         "1.2.3"};
    const int times = 1 + int(random() % 8);
    for (int i = 0; i < times && !bytes.isEmpty(); ++i) {
        const auto at = qsizetype(random() % unsigned(bytes.size())), length = qsizetype(random() % 60);
        switch (random() % 6) {
            case 0:
                bytes[at] = char(random());
                break;
            case 1:
                bytes.remove(at, length);
                break;
            case 2:
                bytes.insert(at, bytes.mid(qsizetype(random() % unsigned(bytes.size())), length));
                break;
            case 3:
                bytes.insert(at, tokens[random() % std::size(tokens)]);
                break;
            case 4:
                bytes.truncate(std::max<qsizetype>(at, bytes.size() / 2));
                break;
            default:
                bytes.replace(at, 1, tokens[random() % std::size(tokens)]);
        }
    }
    return bytes;
}

/// Damages a part inside the zip and packs it again: damage outside only meets the check sums.
QByteArray damagedWithin(const QByteArray& bytes, Random& random) {
    zip_error_t error;
    zip_source_t* from = zip_source_buffer_create(bytes.constData(), zip_uint64_t(bytes.size()), 0, &error);
    zip_t* old = zip_open_from_source(from, ZIP_RDONLY, &error);
    zip_source_t* to = zip_source_buffer_create(nullptr, 0, 0, &error);
    zip_source_keep(to);
    zip_t* made = zip_open_from_source(to, ZIP_TRUNCATE, &error);
    const zip_int64_t parts = zip_get_num_entries(old, 0);
    const zip_int64_t chosen = zip_int64_t(random() % unsigned(parts));
    std::vector<QByteArray> held;  // libzip reads them when it closes
    held.reserve(size_t(parts));
    for (zip_int64_t i = 0; i < parts; ++i) {
        zip_stat_t about;
        zip_stat_index(old, zip_uint64_t(i), 0, &about);
        QByteArray part(qsizetype(about.size), '\0');
        zip_file_t* file = zip_fopen_index(old, zip_uint64_t(i), 0);
        zip_fread(file, part.data(), about.size);
        zip_fclose(file);
        const bool hit = i == chosen || random() % 4 == 0;
        held.push_back(hit ? damaged(part, random) : part);
        zip_file_add(made, about.name,
                     zip_source_buffer(made, held.back().constData(), zip_uint64_t(held.back().size()), 0),
                     ZIP_FL_OVERWRITE);
    }
    zip_close(made);
    zip_discard(old);
    zip_stat_t size;
    zip_source_stat(to, &size);
    QByteArray result(qsizetype(size.size), '\0');
    zip_source_open(to);
    zip_source_read(to, result.data(), size.size);
    zip_source_close(to);
    zip_source_free(to);
    return result;
}

long valueOf(int argc, char** argv, const char* name, long otherwise) {
    for (int i = 1; i + 1 < argc; ++i)
        if (std::strcmp(argv[i], name) == 0) return std::atol(argv[i + 1]);
    return otherwise;
}

}  // namespace

int main(int argc, char** argv) {
    const long seconds = valueOf(argc, argv, "--seconds", 0), seed = valueOf(argc, argv, "--seed", 1);
    const long cases = valueOf(argc, argv, "--cases", seconds > 0 ? 0 : 400);
    std::vector<QByteArray> seeds;
    for (const char* file : {"db/demo/heats.csv", "db/demo/cert-export.csv"})
        seeds.push_back(fileBytes(QString::fromStdString(soak::productPath(file).string())).left(6000));
    const QByteArray book = workbook();
    Random random{unsigned(seed)};
    const auto end = std::chrono::steady_clock::now() + std::chrono::seconds(seconds);
    long done = 0;
    for (; seconds > 0 ? std::chrono::steady_clock::now() < end : done < cases; ++done) {
        const bool zipped = random() % 3 == 0;
        const QByteArray input = zipped ? damagedWithin(book, random) : damaged(seeds[random() % seeds.size()], random);
        QFile last(QString("fuzz-last-%1.bin").arg(seed));  // what a crash leaves to be looked at
        if (seconds > 0 && last.open(QIODevice::WriteOnly)) last.write(input);
        last.close();
        readAsCertificate(input);
    }
    std::printf("%ld damaged certificates read, seed %ld: no crash, no broken promise\n", done, seed);
    return 0;
}
