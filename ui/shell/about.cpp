#include "ui/shell/about.hpp"
#include "ui/theme/theme.hpp"
#include <QCoreApplication>
#include <QLabel>
#include <QPushButton>
#include <QVBoxLayout>

namespace sinewright::ui {

About::About(QWidget* parent) : QDialog(parent) {
    setObjectName("about");
    setWindowTitle(tr("Cautions and about"));
    setAccessibleName(windowTitle());
    setAttribute(Qt::WA_DeleteOnClose);
    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(24, 20, 24, 20);
    column->setSpacing(10);
    auto* name = new QLabel(tr("Sinewright %1").arg(QCoreApplication::applicationVersion()), this);
    name->setFont(theme().font(Theme::question_px, QFont::DemiBold));
    column->addWidget(name);
    // Source: IEC 61010-1; EU 2003/10/EC; NIOSH 1998.
    const QString lines[] = {
        tr("Says of a sine source, from its drawing, whether it starts, where it rests and how clean it is."),
        tr("Results are computed from models. A measurement on the bench decides."),
        tr("Mains-fed equipment: protective earth, insulation and touchable parts after IEC 61010-1 (below 30 V rms, "
           "42.4 V peak, 60 V DC), by licensed people under local codes."),
        tr("Tones harm hearing and drivers. 85 dB(A) over 8 hours is the usual action level; halve the time for every "
           "3 dB more. Start at a low level, never on headphones first. A 20 Hz or 20 kHz tone can destroy a driver "
           "unheard."),
        tr("A loop without level control can swing to the rails when switched on: mute the output until it has "
           "settled."),
        tr("Free software under the GNU General Public License, version 3."),
    };
    for (const QString& line : lines) {
        auto* label = new QLabel(line, this);
        label->setWordWrap(true);
        column->addWidget(label);
    }
    auto* close = new QPushButton(tr("Close"), this);
    close->setObjectName("close_about");
    connect(close, &QPushButton::clicked, this, &QDialog::close);
    column->addSpacing(6);
    column->addWidget(close, 0, Qt::AlignRight);
    setFixedWidth(520);
}

} // namespace sinewright::ui
