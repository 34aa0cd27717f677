#include "ui/theme/theme.hpp"
#include "ui/theme/style_sheet.hpp"
#include <QApplication>
#include <QEvent>
#include <QFontDatabase>
#include <QPalette>
#include <QScreen>
#include <QSettings>
#include <QStyleFactory>
#include <cmath>

namespace sinewright::ui {
namespace {

Theme make_light() {
    Theme t;
    t.sheet = "#FBF9F4", t.panel = "#F3EFE6", t.raised = "#FFFFFF";
    t.line = "#D9D2C3", t.grid = "#E6E0D3";
    t.ink = "#1D2733", t.soft = "#5B6573", t.faint = "#636B77";
    t.ribbon = "#BFE3DC", t.ribbon_arrow = "#2A8C7F", t.accent = "#00695C";
    t.cut = "#A3195B", t.band = QColor(0xF2, 0xC1, 0x4E, 128);
    t.first_curve = "#0B5FA5", t.second_curve = "#7A4FA3", t.ghost = "#B9B2A3";
    t.meets = "#00695C", t.misses = "#B3381A", t.warn = "#8A5A00";
    t.meets_ground = "#DDF0EB", t.misses_ground = "#F9E0D8", t.grows_ground = "#F7E3DC";
    return t;
}

Theme make_dark() {
    Theme t;
    t.dark = true;
    t.sheet = "#14191F", t.panel = "#1B222A", t.raised = "#222B35";
    t.line = "#36414D", t.grid = "#2A333D";
    t.ink = "#E9EDF1", t.soft = "#A9B4BF", t.faint = "#8D98A4";
    t.ribbon = "#1E4A46", t.ribbon_arrow = "#5CC9B8", t.accent = "#6FD3C3";
    t.cut = "#F07BAE", t.band = QColor(0xB9, 0x8A, 0x1E, 128);
    t.first_curve = "#6CB6F5", t.second_curve = "#C7A3EE", t.ghost = "#5B6570";
    t.meets = "#6FD3C3", t.misses = "#FF9A7A", t.warn = "#F2C14E";
    t.meets_ground = "#18362F", t.misses_ground = "#46261C", t.grows_ground = "#33231F";
    return t;
}

QPalette palette_of(const Theme& t) {
    QPalette p;
    p.setColor(QPalette::Window, t.panel), p.setColor(QPalette::WindowText, t.ink);
    p.setColor(QPalette::Base, t.raised), p.setColor(QPalette::AlternateBase, t.panel);
    p.setColor(QPalette::Text, t.ink), p.setColor(QPalette::PlaceholderText, t.faint);
    p.setColor(QPalette::Button, t.raised), p.setColor(QPalette::ButtonText, t.ink);
    p.setColor(QPalette::BrightText, t.misses);
    p.setColor(QPalette::Highlight, t.accent), p.setColor(QPalette::HighlightedText, t.sheet);
    p.setColor(QPalette::ToolTipBase, t.raised), p.setColor(QPalette::ToolTipText, t.ink);
    p.setColor(QPalette::Link, t.accent), p.setColor(QPalette::LinkVisited, t.second_curve);
    p.setColor(QPalette::Light, t.raised), p.setColor(QPalette::Midlight, t.grid);
    p.setColor(QPalette::Mid, t.line), p.setColor(QPalette::Dark, t.soft), p.setColor(QPalette::Shadow, t.line);
    for (auto role : {QPalette::WindowText, QPalette::Text, QPalette::ButtonText})
        p.setColor(QPalette::Disabled, role, t.faint);
    return p;
}

const QString& sans_family() {
    static const QString family = [] {
        if (QFontDatabase::hasFamily("Inter")) return QString("Inter");
        return QFontDatabase::systemFont(QFontDatabase::GeneralFont).family();
    }();
    return family;
}

bool system_is_dark() {
    QApplication::setPalette(QPalette()); // what the platform gives when nobody asks otherwise
    const QPalette system = QGuiApplication::palette();
    return system.color(QPalette::Window).lightness() < system.color(QPalette::WindowText).lightness();
}

constexpr const char* choice_key = "appearance/theme";
constexpr const char* choice_words[] = {"system", "light", "dark"};

} // namespace

const Theme& light_theme() {
    static const Theme theme = make_light();
    return theme;
}

const Theme& dark_theme() {
    static const Theme theme = make_dark();
    return theme;
}

QFont Theme::font(double px, int weight) const {
    QFont font(sans_family());
    const QScreen* screen = QGuiApplication::primaryScreen();
    font.setPointSizeF(px * 72 / (screen ? screen->logicalDotsPerInchY() : 96)); // pixel sizes are whole numbers in Qt
    font.setWeight(static_cast<QFont::Weight>(weight));
    font.setHintingPreference(QFont::PreferNoHinting);
    return font;
}

double contrast_ratio(const QColor& a, const QColor& b) {
    const auto luminance = [](const QColor& c) {
        const auto linear = [](double v) { return v <= 0.03928 ? v / 12.92 : std::pow((v + 0.055) / 1.055, 2.4); };
        return 0.2126 * linear(c.redF()) + 0.7152 * linear(c.greenF()) + 0.0722 * linear(c.blueF());
    };
    const double la = luminance(a) + 0.05, lb = luminance(b) + 0.05;
    return std::max(la, lb) / std::min(la, lb);
}

QColor faded(QColor colour, double opacity) {
    colour.setAlphaF(static_cast<float>(colour.alphaF() * opacity));
    return colour;
}

ThemeKeeper& ThemeKeeper::instance() {
    static ThemeKeeper keeper;
    return keeper;
}

void ThemeKeeper::choose(ThemeChoice choice) {
    QSettings().setValue(choice_key, choice_words[static_cast<int>(choice)]);
    use(choice);
}

void ThemeKeeper::use(ThemeChoice choice) {
    choice_ = choice;
    apply();
}

void ThemeKeeper::restore() {
    const QString word = QSettings().value(choice_key).toString();
    for (int i = 0; i < 3; ++i)
        if (word == choice_words[i]) choice_ = static_cast<ThemeChoice>(i);
    apply();
}

void ThemeKeeper::apply() {
    applying_ = true;
    const bool dark = choice_ == ThemeChoice::follow_system ? system_is_dark() : choice_ == ThemeChoice::dark;
    in_force_ = dark ? &dark_theme() : &light_theme();
    if (!applied_) {
        QApplication::setStyle(QStyleFactory::create("Fusion"));
        qApp->installEventFilter(this);
        applied_ = true;
    }
    QApplication::setPalette(palette_of(*in_force_));
    QApplication::setFont(in_force_->font(Theme::body_px));
    qApp->setStyleSheet(style_sheet(*in_force_));
    applying_ = false;
    emit changed();
}

bool ThemeKeeper::eventFilter(QObject* watched, QEvent* event) {
    if (event->type() == QEvent::ThemeChange && !applying_ && choice_ == ThemeChoice::follow_system) apply();
    return QObject::eventFilter(watched, event);
}

} // namespace sinewright::ui
