/// Runs the window tests inside a QApplication: no display is needed, and no settings of the user are touched.
#define CATCH_CONFIG_RUNNER
#include <QApplication>
#include <QSettings>
#include <QTemporaryDir>
#include <catch2/catch.hpp>

int main(int argc, char** argv) {
    if (!qEnvironmentVariableIsSet("QT_QPA_PLATFORM")) qputenv("QT_QPA_PLATFORM", "offscreen");
    QTemporaryDir settings_folder;
    QSettings::setDefaultFormat(QSettings::IniFormat);
    QSettings::setPath(QSettings::IniFormat, QSettings::UserScope, settings_folder.path());
    QCoreApplication::setOrganizationName("sinewright");
    QCoreApplication::setApplicationName("sinewright");
    QApplication application(argc, argv);
    return Catch::Session().run(argc, argv);
}
