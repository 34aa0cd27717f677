/// The desktop program: sinewright [FILE], or a picture of its window without a display.
#include "ui/shell/main_window.hpp"
#include "ui/shell/views.hpp"
#include "ui/theme/theme.hpp"
#include "ui/verdict/verdict_strip.hpp"
#include <QApplication>
#include <QCommandLineParser>
#include <QElapsedTimer>
#include <QFileInfo>
#include <chrono>
#include <cstdio>

using namespace sinewright::ui;

namespace {

constexpr int results_within_ms = 20000;
const auto process_start = std::chrono::steady_clock::now();

struct Wishes {
    QString file, picture, view;
    QSize size{1600, 1000};
    std::optional<ThemeChoice> theme;
    bool report_start_time = false;
};

int refuse(const QString& message) {
    std::fprintf(stderr, "sinewright: %s\n", qPrintable(message));
    return 2;
}

void add_options(QCommandLineParser& parser) {
    parser.setApplicationDescription("Sketch the loop of a sine source and see whether it starts.");
    parser.addPositionalArgument("file", "A design to open.", "[FILE]");
    parser.addOptions({
        {"picture", "Draw the window into a PNG file, without a display, and end.", "file"},
        {"view", "With --picture: the view to show.", "name"},
        {"size", "With --picture: size of the window, 1600x1000 by default.", "WxH"},
        {"theme", "Colours: light or dark; as the system by default.", "theme"},
        {"scale", "With --picture: picture points per window point, 1 to 4.", "factor"},
        {"report-start-time", "Print the milliseconds until the first verdict is painted."},
    });
    parser.addHelpOption();
    parser.addVersionOption();
}

/// Reads the wishes; an empty message means all of them make sense.
QString read_wishes(const QCommandLineParser& parser, Wishes& wishes) {
    if (parser.positionalArguments().size() > 1) return "one file at a time.";
    wishes.file = parser.positionalArguments().value(0);
    wishes.picture = parser.value("picture");
    wishes.view = parser.value("view");
    wishes.report_start_time = parser.isSet("report-start-time");
    if (parser.isSet("size")) {
        const QStringList sides = parser.value("size").split('x');
        wishes.size = {sides.value(0).toInt(), sides.value(1).toInt()};
        if (sides.size() != 2 || wishes.size.width() < 320 || wishes.size.height() < 240 ||
            std::max(wishes.size.width(), wishes.size.height()) > 8192)
            return "--size wants a width and a height from 320x240 to 8192x8192, such as 1600x1000.";
    }
    if (parser.isSet("theme")) {
        const QString theme = parser.value("theme");
        if (theme != "light" && theme != "dark") return "--theme is light or dark, not \"" + theme + "\".";
        wishes.theme = theme == "dark" ? ThemeChoice::dark : ThemeChoice::light;
    }
    if (!wishes.picture.isEmpty() && wishes.file.isEmpty()) return "--picture needs a design file.";
    return {};
}

int draw_picture(const Wishes& wishes) {
    ThemeKeeper::instance().use(wishes.theme.value_or(ThemeChoice::light));
    MainWindow window(false);
    QString message;
    if (!window.document().open(wishes.file, &message)) return refuse(message);
    window.setMinimumSize(1, 1);
    window.resize(wishes.size);
    if (!wishes.view.isEmpty() && !window.views().show_view(wishes.view))
        return refuse("there is no view \"" + wishes.view + "\".");
    window.show();
    if (!window.analyst().wait_until_current(results_within_ms)) return refuse("no results in time for a picture.");
    if (QWidget* focused = window.focusWidget()) focused->clearFocus();
    QApplication::processEvents(); // what the results set in motion: layout, fitted drawing
    if (!window.grab().save(wishes.picture, "PNG")) return refuse("could not write " + wishes.picture + ".");
    return 0;
}

void report_first_verdict(MainWindow& window) {
    QObject::connect(
        &window.verdict(), &VerdictStrip::verdict_painted, &window,
        [] {
            const auto took = std::chrono::steady_clock::now() - process_start;
            std::printf("%lld\n",
                        static_cast<long long>(std::chrono::duration_cast<std::chrono::milliseconds>(took).count()));
            std::fflush(stdout);
        },
        Qt::SingleShotConnection);
}

int run_window(const Wishes& wishes) {
    if (wishes.theme)
        ThemeKeeper::instance().use(*wishes.theme);
    else
        ThemeKeeper::instance().restore();
    auto* window = new MainWindow;
    window->setAttribute(Qt::WA_DeleteOnClose);
    if (!wishes.file.isEmpty()) window->open_now(wishes.file);
    if (wishes.report_start_time) report_first_verdict(*window);
    window->show();
    return QApplication::exec();
}

/// An exit status when there is nothing left to do. Needs no display.
std::optional<int> read_command_line(int argc, char** argv, Wishes& wishes) {
    QCoreApplication without_display(argc, argv);
    QCommandLineParser parser;
    add_options(parser);
    if (!parser.parse(QCoreApplication::arguments())) return refuse(parser.errorText());
    if (parser.isSet("help") || parser.isSet("version")) {
        std::puts(parser.isSet("help") ? qPrintable(parser.helpText())
                                       : qPrintable("sinewright " + QCoreApplication::applicationVersion()));
        return 0;
    }
    if (const QString message = read_wishes(parser, wishes); !message.isEmpty()) return refuse(message);
    return {};
}

/// The platform and the scale must be settled before there is an application object.
void settle_before_start(int argc, char** argv) {
    for (int i = 1; i < argc; ++i) {
        const QString argument = argv[i];
        if (argument.startsWith("--picture")) qputenv("QT_QPA_PLATFORM", "offscreen");
        if (argument == "--scale" && i + 1 < argc) qputenv("QT_SCALE_FACTOR", argv[i + 1]);
        if (argument.startsWith("--scale=")) qputenv("QT_SCALE_FACTOR", argument.mid(8).toUtf8());
    }
}

} // namespace

int main(int argc, char** argv) {
    settle_before_start(argc, argv);
    QCoreApplication::setOrganizationName("sinewright");
    QCoreApplication::setApplicationName("sinewright");
    QCoreApplication::setApplicationVersion(SINEWRIGHT_VERSION);
    Wishes wishes;
    if (const std::optional<int> status = read_command_line(argc, argv, wishes)) return *status;
    QApplication application(argc, argv);
    return wishes.picture.isEmpty() ? run_window(wishes) : draw_picture(wishes);
}
