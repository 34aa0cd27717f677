#include "ui/theme/style_sheet.hpp"
#include "ui/theme/theme.hpp"
#include <QRegularExpression>
#include <catch2/catch.hpp>

using namespace sinewright::ui;

TEST_CASE("black on white has the contrast 21 and a colour on itself 1", "[theme][ordinary]") {
    // Source: WCAG 2.1, definition of contrast ratio.
    CHECK(contrast_ratio(Qt::black, Qt::white) == Approx(21));
    CHECK(contrast_ratio(QColor("#777777"), QColor("#777777")) == Approx(1));
    CHECK(contrast_ratio(QColor("#767676"), Qt::white) == Approx(4.54).epsilon(0.002)); // WCAG's well-known limit grey
}

TEST_CASE("all text is readable on every ground it is set on, light and dark", "[theme][ordinary]") {
    for (const Theme* t : {&light_theme(), &dark_theme()}) {
        INFO((t->dark ? "dark" : "light"));
        const std::vector<QColor> plain_grounds = {t->sheet, t->panel, t->raised};
        for (const QColor& text : {t->ink, t->soft, t->faint, t->accent, t->cut, t->first_curve, t->second_curve,
                                   t->meets, t->misses, t->warn})
            for (const QColor& ground : plain_grounds) {
                INFO(text.name().toStdString() << " on " << ground.name().toStdString());
                CHECK(contrast_ratio(text, ground) >= 4.5); // WCAG 2.1, 1.4.3 level AA
            }
        for (const QColor& text : {t->ink, t->soft, t->cut, t->meets, t->misses, t->warn})
            for (const QColor& ground : {t->meets_ground, t->misses_ground, t->grows_ground}) {
                INFO(text.name().toStdString() << " on the tint " << ground.name().toStdString());
                CHECK(contrast_ratio(text, ground) >= 4.5);
            }
        for (const QColor& ground : {t->cut, t->accent, t->warn}) CHECK(contrast_ratio(t->sheet, ground) >= 4.5);
        CHECK(contrast_ratio(t->ribbon_arrow, t->sheet) >= 3); // WCAG 2.1, 1.4.11: graphical objects
    }
}

TEST_CASE("the style sheet leaves no colour name unreplaced", "[theme][ordinary]") {
    for (const Theme* t : {&light_theme(), &dark_theme()}) {
        const QString text = style_sheet(*t);
        CHECK(!text.contains(QRegularExpression("\\{[a-z_]+\\}")));
        CHECK(text.contains(t->accent.name()));
    }
}

TEST_CASE("choosing dark changes the theme in force and tells the widgets", "[theme][ordinary]") {
    auto& keeper = ThemeKeeper::instance();
    keeper.use(ThemeChoice::light);
    int told = 0;
    QObject listener;
    QObject::connect(&keeper, &ThemeKeeper::changed, &listener, [&] { ++told; });
    keeper.use(ThemeChoice::dark);
    CHECK(theme().dark);
    CHECK(told == 1);
    keeper.use(ThemeChoice::light);
    CHECK(!theme().dark);
}
