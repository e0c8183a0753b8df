(** * Endless claims: longer graphs

    A longer graph has the plan of a shorter one with a block of items once more. What the block
    makes of a set of states depends on that set alone; so when a set comes again, all that
    follows comes again. *)

From Coq Require Import Bool List Arith PArith FMapPositive Permutation Lia.
From Certify Require Import Statement Question Normal Edges Facts Sweep SweepChain SweepFits
  SweepSound EndlessPlan EndlessNames EndlessSteps EndlessTour.
Import ListNotations.

(** ** Plans of like graphs *)

Section Like.

Context {A : Type}.
Variables meet meet' : A -> A -> bool.
Variable move : A -> A.
Variable fixed : list A.
Variable width : nat.

Lemma window_names : forall q (l l' : list A) b b',
  length l = length l' ->
  (forall i x x', nth_error l i = Some x -> nth_error l' i = Some x' -> meet' b' x' = meet b x) ->
  map fst (filter (fun p => meet' b' (snd p)) (number q l'))
  = map fst (filter (fun p => meet b (snd p)) (number q l)).
Proof.
  intros q l l' b b'. revert q l'. induction l as [| x l IH]; intros q [| x' l'] size like;
    try discriminate; [reflexivity |].
  cbn [number filter snd]. rewrite (like 0 x x' eq_refl eq_refl).
  assert (later : map fst (filter (fun p => meet' b' (snd p)) (number (Pos.succ q) l'))
                = map fst (filter (fun p => meet b (snd p)) (number (Pos.succ q) l))).
  { apply IH; [now injection size |]. intros i y y' y_at y'_at. now apply (like (S i)). }
  destruct (meet b x); cbn [map fst]; congruence.
Qed.

Lemma names_like : forall b b' rest rest',
  length (firstn width rest) = length (firstn width rest') ->
  (forall f, In f fixed -> meet' b' (move f) = meet b f) ->
  (forall i x x', nth_error (firstn width rest) i = Some x ->
     nth_error (firstn width rest') i = Some x' -> meet' b' x' = meet b x) ->
  neighbour_names meet' (map move fixed) width b' rest' = neighbour_names meet fixed width b rest.
Proof.
  intros b b' rest rest' size fixed_like like. unfold neighbour_names, window, first_name.
  rewrite !filter_app, !map_app, map_length. f_equal; apply window_names; trivial.
  - now rewrite map_length.
  - intros i x x' x_at x'_at. rewrite nth_error_map, x_at in x'_at. injection x'_at as <-.
    apply fixed_like. now apply nth_error_In in x_at.
Qed.

(** A graph that is moved. *)
Lemma plan_move : forall body,
  (forall b x, In b body -> In x (fixed ++ body) -> meet' (move b) (move x) = meet b x) ->
  plan meet' (map move fixed) width (map move body) = plan meet fixed width body.
Proof.
  induction body as [| b rest IH]; intros like; [reflexivity |].
  cbn [map plan]. rewrite map_length, IH.
  2:{ intros c x c_here x_here. apply like; [now right |].
      apply in_app_or in x_here as [|]; apply in_or_app; [now left | right; now right]. }
  do 2 f_equal. apply names_like.
  - now rewrite firstn_map, map_length.
  - intros f here. apply like; [now left | apply in_or_app; now left].
  - intros i x x' x_at x'_at. rewrite firstn_map, nth_error_map, x_at in x'_at.
    injection x'_at as <-. apply like; [now left |]. apply in_or_app. right. right.
    apply nth_error_In in x_at. rewrite <- (firstn_skipn width rest). apply in_or_app. now left.
Qed.

(** The beginning of a graph that is made longer. *)
Lemma plan_begin : forall l t more,
  width < length t ->
  (forall b f, In b l -> In f fixed -> meet' b (move f) = meet b f) ->
  (forall b x, In b l -> In x (l ++ t) -> meet' b x = meet b x) ->
  firstn (length l) (plan meet' (map move fixed) width (l ++ t ++ more))
  = firstn (length l) (plan meet fixed width (l ++ t)).
Proof.
  induction l as [| b l IH]; intros t more large fixed_like like; [reflexivity |].
  cbn [length app plan firstn]. rewrite IH; trivial.
  2:{ intros c f c_here. apply fixed_like. now right. }
  2:{ intros c x c_here x_here. apply like; now right. }
  assert (first_part : firstn width (l ++ t ++ more) = firstn width (l ++ t)).
  { rewrite app_assoc, (firstn_app width (l ++ t)), app_length.
    replace (width - (length l + length t)) with 0 by lia. cbn [firstn]. apply app_nil_r. }
  do 2 f_equal.
  - rewrite !app_length. replace (length l + (length t + length more) ?= width) with Gt
      by (symmetry; apply Nat.compare_gt_iff; lia).
    symmetry. apply Nat.compare_gt_iff. lia.
  - apply names_like; rewrite ?first_part; trivial.
    + intros f here. apply fixed_like; [now left | exact here].
    + intros i x x' x_at x'_at. rewrite x_at in x'_at. injection x'_at as <-.
      apply like; [now left |]. right. apply nth_error_In in x_at.
      rewrite <- (firstn_skipn width (l ++ t)). apply in_or_app. now left.
Qed.

End Like.

Lemma plan_skip : forall (A : Type) (meet : A -> A -> bool) fixed width l m,
  skipn (length l) (plan meet fixed width (l ++ m)) = plan meet fixed width m.
Proof. intros A meet fixed width l m. induction l as [| b l IH]; [reflexivity | exact IH]. Qed.

Lemma plan_length : forall (A : Type) (meet : A -> A -> bool) fixed width body,
  length (plan meet fixed width body) = length body.
Proof. intros A meet fixed width body. induction body; cbn; congruence. Qed.

(** ** Sets of states *)

Definition alike (ss ts : list state) : Prop := forall s, In s ss <-> In s ts.

Lemma run_app : forall first width items later ss,
  run first width (items ++ later) ss = run first width later (run first width items ss).
Proof.
  intros first width items later. induction items as [| i items IH]; intros ss; [reflexivity |].
  apply IH.
Qed.

Lemma run_alike : forall first width items ss ts, alike ss ts ->
  alike (run first width items ss) (run first width items ts).
Proof.
  intros first width items. induction items as [| i items IH]; intros ss ts same; [exact same |].
  apply IH. intros s. rewrite !in_gather. split; intros (t & here & s_here); exists t;
    (split; [now apply same | exact s_here]).
Qed.

Lemma completed_alike : forall ss ts, alike ss ts -> completed ss = completed ts.
Proof. intros ss ts same. apply eq_true_iff_eq. rewrite !completed_spec. apply same. Qed.

(** Equality of sets, computed with the map of one. *)
Definition known (c : collection) (s : state) : bool :=
  match PositiveMap.find (key s) (fst c) with
  | Some l => existsb (same s) l
  | None => false
  end.

Definition covers (ss ts : list state) : bool :=
  let c := fold_left collect ss (PositiveMap.empty _, []) in forallb (known c) ts.

Definition check_alike (ss ts : list state) : bool := if covers ss ts then covers ts ss else false.

Lemma covers_spec : forall ss ts, covers ss ts = true -> incl ts ss.
Proof.
  intros ss ts all s here. unfold covers in all.
  set (c := fold_left collect ss _) in all. rewrite forallb_forall in all.
  apply all in here. unfold known in here.
  destruct (PositiveMap.find (key s) (fst c)) as [bucket |] eqn:found; [| discriminate].
  apply existsb_exists in here as (t & t_here & E). apply same_equal in E as <-.
  assert (holds : held c).
  { apply collect_list. intros q l r. cbn [fst]. now rewrite PositiveMap.gempty. }
  assert (s_in := holds (key s) bucket s found t_here).
  assert (only : forall l c0, In s (snd (fold_left collect l c0)) -> In s l \/ In s (snd c0)).
  { clear. induction l as [| t l IH]; intros c0 here; [now right |].
    cbn [fold_left] in here. apply IH in here as [here | here]; [left; now right |].
    apply collect_only in here as [-> | here]; [left; now left | now right]. }
  now destruct (only _ _ s_in).
Qed.

Lemma check_alike_spec : forall ss ts, check_alike ss ts = true -> alike ss ts.
Proof.
  intros ss ts both. unfold check_alike in both. destruct (covers ss ts) eqn:one; [| discriminate].
  intros s. split; apply covers_spec; assumption.
Qed.

(** ** A block, many times *)

Section Blocks.

Variable first : vertex.
Variables k width : nat.
Variables block right last_items : list item.

Fixpoint repeat_items (m : nat) : list item :=
  match m with
  | O => []
  | S m' => block ++ repeat_items m'
  end.

(** The answer when [m] blocks follow. *)
Definition later_answer (ss : list state) (m : nat) : bool :=
  finish k last_items (run first width right (run first width (repeat_items m) ss)).

(** The answers for 0, ..., m - 1, and the states after m blocks. *)
Fixpoint answers (m : nat) (ss : list state) : list bool * list state :=
  match m with
  | O => ([], ss)
  | S m' =>
      let (later, last) := answers m' (run first width block ss) in
      (finish k last_items (run first width right ss) :: later, last)
  end.

Lemma later_alike : forall ss ts m, alike ss ts -> later_answer ss m = later_answer ts m.
Proof.
  intros ss ts m same. unfold later_answer, finish.
  apply completed_alike. now repeat apply run_alike.
Qed.

Lemma later_next : forall ss m,
  later_answer ss (S m) = later_answer (run first width block ss) m.
Proof. intros ss m. unfold later_answer. cbn [repeat_items]. now rewrite run_app. Qed.

Lemma answers_spec : forall m ss,
  (forall i, i < m -> nth_error (fst (answers m ss)) i = Some (later_answer ss i)) /\
  (forall j, later_answer ss (m + j) = later_answer (snd (answers m ss)) j).
Proof.
  induction m as [| m IH]; intros ss; [split; [lia | reflexivity] |].
  destruct (IH (run first width block ss)) as [one two]. cbn [answers].
  destruct (answers m (run first width block ss)) as [later last]. cbn [fst snd] in *. split.
  - intros [| i] small; [reflexivity |]. cbn [nth_error]. rewrite later_next. apply one. lia.
  - intros j. cbn [Nat.add]. now rewrite later_next, two.
Qed.

(** From [ss] on the answers are these, of which the last [period] come again. *)
Definition check_answers (ss : list state) (preperiod period : nat) (claimed : list bool) : bool :=
  let (before, middle) := answers preperiod ss in
  let (again, last) := answers period middle in
  if forallb (fun p => Bool.eqb (fst p) (snd p)) (combine (before ++ again) claimed)
  then if length claimed =? preperiod + period then check_alike last middle else false
  else false.

Lemma answers_length : forall m ss, length (fst (answers m ss)) = m.
Proof.
  induction m as [| m IH]; intros ss; [reflexivity |]. cbn [answers].
  specialize (IH (run first width block ss)). destruct (answers m _).
  cbn [fst length] in *. congruence.
Qed.

Theorem check_answers_spec : forall ss preperiod period claimed,
  check_answers ss preperiod period claimed = true ->
  (forall i, i < preperiod + period -> nth_error claimed i = Some (later_answer ss i)) /\
  (forall m, preperiod <= m -> later_answer ss (m + period) = later_answer ss m).
Proof.
  intros ss mu lambda claimed checked. unfold check_answers in checked.
  destruct (answers_spec mu ss) as [one two]. pose proof (answers_length mu ss) as size.
  destruct (answers mu ss) as [before middle]. cbn [fst snd] in *.
  destruct (answers_spec lambda middle) as [three four].
  pose proof (answers_length lambda middle) as size'.
  destruct (answers lambda middle) as [again last]. cbn [fst snd] in *.
  destruct (forallb _ _) eqn:equal; [| discriminate].
  destruct (Nat.eqb_spec (length claimed) (mu + lambda)) as [all | _]; [| discriminate].
  apply check_alike_spec in checked. split.
  - assert (same : claimed = before ++ again).
    { assert (sizes : length (before ++ again) = length claimed) by (rewrite app_length; lia).
      clear -equal sizes. revert claimed equal sizes.
      induction (before ++ again) as [| a l IH]; intros [| b m] equal sizes; try discriminate;
        [reflexivity |].
      cbn [combine forallb fst snd] in equal. apply andb_true_iff in equal as [E equal].
      apply eqb_prop in E as ->. f_equal. apply IH; [exact equal | now injection sizes]. }
    intros i small. rewrite same. destruct (Nat.lt_ge_cases i mu) as [less | more].
    + rewrite nth_error_app1 by lia. now apply one.
    + rewrite nth_error_app2 by lia. rewrite size, (three (i - mu)) by lia.
      rewrite <- two. do 2 f_equal. lia.
  - intros m more. replace (m + lambda) with (mu + (lambda + (m - mu))) by lia.
    rewrite two, four. replace m with (mu + (m - mu)) at 2 by lia. rewrite two.
    now apply later_alike.
Qed.

End Blocks.
