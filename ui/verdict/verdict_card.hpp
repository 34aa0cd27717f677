#pragma once
/// The tinted card at the left of the verdict strip: the headline and its main reason.
#include <QString>
#include <QWidget>

namespace sinewright::ui {

class VerdictCard : public QWidget {
    Q_OBJECT
  public:
    enum class Tone { quiet, good, bad };
    explicit VerdictCard(QWidget* parent = nullptr);
    void say(Tone tone, const QString& headline, const QString& reason);
    void set_stale(bool stale);
    QString headline() const { return headline_; }
    QString reason() const { return reason_; }
    Tone tone() const { return tone_; }

  protected:
    void paintEvent(QPaintEvent*) override;

  private:
    Tone tone_ = Tone::quiet;
    QString headline_, reason_;
    bool stale_ = false;
};

} // namespace sinewright::ui
